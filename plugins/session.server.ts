/** The page is rendered knowing who looks at it, so that nothing jumps when it comes alive. */
export default defineNuxtPlugin(async () => {
  try {
    await useSessionStore().load()
  } catch {
    // Without an answer the page is rendered for a stranger; the server guards everything by itself.
  }
})
