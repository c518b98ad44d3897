import type { RegisterBody, SignInBody } from '#shared/schemas/account'

export interface SessionUser {
  name: string
  email: string
}

/** Who is signed in. The server decides at every request; this is only what the page shows. */
export const useSessionStore = defineStore('session', () => {
  const user = ref<SessionUser | null>(null)

  async function load() {
    const answer = await useRequestFetch()<{ user: SessionUser | null }>('/api/auth/me')
    user.value = answer.user
  }

  async function register(body: RegisterBody) {
    user.value = (await callApi<{ user: SessionUser }>('/api/auth/register', { method: 'POST', body })).user
  }

  async function signIn(body: SignInBody) {
    user.value = (await callApi<{ user: SessionUser }>('/api/auth/sign-in', { method: 'POST', body })).user
  }

  async function signOut() {
    await callApi('/api/auth/sign-out', { method: 'POST', body: {} })
    user.value = null
  }

  return { user, load, register, signIn, signOut }
})
