/** What people wrote stands in the head of a page as text: of its attributes only quotes are escaped otherwise. */
export default defineNuxtPlugin(({ ssrContext }) => {
  ssrContext?.head.hooks?.hook('ssr:render', ({ tags }) => {
    for (const { tag, props } of tags) {
      if (tag === 'meta' && typeof props.content === 'string') props.content = props.content.replaceAll('&', '&amp;').replaceAll('<', '&lt;')
    }
  })
})
