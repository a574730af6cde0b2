import { createPinia } from 'pinia'

/** State of this browser alone; what the server holds is in `queries`. */
export default () => createPinia()
