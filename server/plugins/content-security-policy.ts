import { randomBytes } from 'node:crypto'

/**
 * Pages run only scripts that carry the nonce of this very answer. Style attributes are allowed, because the server renders some and no
 * person's text ever reaches one; style elements need the nonce too.
 */
export default defineNitroPlugin((nitro) => {
  if (import.meta.dev) return
  nitro.hooks.hook('render:html', (html, { event }) => {
    const nonce = randomBytes(16).toString('base64')
    const mark = (part: string) => part.replace(/<(script|style)(?=[\s>])/g, `<$1 nonce="${nonce}"`)
    html.head = html.head.map(mark)
    html.bodyPrepend = html.bodyPrepend.map(mark)
    html.bodyAppend = html.bodyAppend.map(mark)
    setResponseHeader(event, 'Content-Security-Policy', [
      `default-src 'self'`, `script-src 'self' 'nonce-${nonce}'`, `style-src 'self' 'nonce-${nonce}'`, `style-src-attr 'unsafe-inline'`,
      `img-src 'self' data: blob:`, `font-src 'self' data:`, `connect-src 'self'`, `object-src 'none'`, `base-uri 'none'`, `form-action 'self'`,
      `frame-ancestors 'none'`,
    ].join('; '))
  })
  nitro.hooks.hook('render:response', (response) => {
    delete response.headers?.['x-powered-by']
  })
})
