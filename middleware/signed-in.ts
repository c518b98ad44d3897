/** Sends strangers to the sign-in page and back afterwards. A courtesy: the guards are on the server. */
export default defineNuxtRouteMiddleware((to) => {
  if (useSessionStore().user === null) return navigateTo({ path: '/sign-in', query: { to: returnAddress(to.path) } })
})
