/** Who is signed in already has no business on the sign-in and register pages. */
export default defineNuxtRouteMiddleware((to) => {
  if (useSessionStore().user !== null) return navigateTo(returnAddress(to.query.to))
})
