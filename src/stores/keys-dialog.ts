import { defineStore } from 'pinia'
import { ref } from 'vue'

/** Whether the list of keys is open over the page. */
export const useKeysDialog = defineStore('keys-dialog', () => ({ isOpen: ref(false) }))
