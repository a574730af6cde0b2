import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import type { Me } from '#shared/contracts/people'
import { ApiProblem } from '../queries/api-problem'
import { fetchMe, signIn as sendSignIn, signOut as sendSignOut } from '../queries/me'

/** Who is signed in, and the sign-in over the page when a session has ended meanwhile. */
export const useSession = defineStore('session', () => {
  const me = ref<Me | null>(null)
  /** Whether the server has said who is signed in, be it nobody. */
  const isSettled = ref(false)
  const isAsking = ref(false)
  let answerAsked: ((signedIn: boolean) => void) | null = null
  let asked: Promise<boolean> | null = null

  const isSignedIn = computed(() => me.value !== null)

  /** Whether somebody is signed in, asked of the server unless it is known that somebody is. @throws {ApiProblem} when it does not answer */
  async function settle(): Promise<boolean> {
    if (me.value) return true
    try {
      me.value = await fetchMe()
      isSettled.value = true
      return true
    } catch (error) {
      if (!(error instanceof ApiProblem) || error.code !== 'not-signed-in') throw error
      isSettled.value = true
      return false
    }
  }

  /** @throws {ApiProblem} 'sign-in-failed', 'too-many-attempts' */
  async function signIn(email: string, password: string): Promise<void> {
    me.value = await sendSignIn({ email, password })
    closeDialog(true)
  }

  async function signOut(): Promise<void> {
    await sendSignOut()
    me.value = null
  }

  /** Opens the sign-in dialog; all calls that need it wait for the same answer. */
  function ask(): Promise<boolean> {
    if (me.value === null) return Promise.resolve(false)
    asked ??= new Promise((resolve) => {
      answerAsked = resolve
      isAsking.value = true
    })
    return asked
  }

  function closeDialog(signedIn: boolean): void {
    isAsking.value = false
    answerAsked?.(signedIn)
    answerAsked = null
    asked = null
  }

  return { me, isSignedIn, isSettled, isAsking, settle, signIn, signOut, ask, giveUp: () => closeDialog(false) }
})
