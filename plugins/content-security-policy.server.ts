/**
 * Pages run only scripts that carry the nonce of this very answer. It is put on the tags themselves before they become text: searching the text of
 * a page for tags would find, and bless, those that a person wrote into a title. Style attributes are allowed, because the server renders some and
 * no person's text ever reaches one; style elements need the nonce too.
 */
export default defineNuxtPlugin({
  name: 'content-security-policy',
  enforce: 'pre',
  setup({ ssrContext }) {
    if (import.meta.dev || ssrContext === undefined) return
    const nonce = btoa(String.fromCharCode(...crypto.getRandomValues(new Uint8Array(16))))
    ssrContext.head.hooks?.hook('ssr:render', ({ tags }) => {
      for (const { tag, props } of tags) if (tag === 'script' || tag === 'style') props.nonce = nonce
    })
    const header = [
      `default-src 'self'`, `script-src 'self' 'nonce-${nonce}'`, `style-src 'self' 'nonce-${nonce}'`, `style-src-attr 'unsafe-inline'`,
      `img-src 'self' data: blob:`, `font-src 'self' data:`, `connect-src 'self'`, `object-src 'none'`, `base-uri 'none'`, `form-action 'self'`,
      `frame-ancestors 'none'`,
    ].join('; ')
    ssrContext.event.node.res.setHeader('Content-Security-Policy', header)
  },
})
