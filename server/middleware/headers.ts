const year = 31_536_000

/** Headers that every dynamic answer carries. */
export default defineEventHandler((event) => {
  const path = event.path.split('?')[0] ?? '/'
  const shared = path.startsWith('/s/') || path.startsWith('/api/shared/')
  setResponseHeaders(event, {
    'X-Content-Type-Options': 'nosniff',
    'X-Frame-Options': 'DENY',
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Referrer-Policy': shared ? 'no-referrer' : 'same-origin',
  })
  if (shared) setResponseHeader(event, 'X-Robots-Tag', 'noindex, nofollow')
  // Pages put a policy of their own in its place, with the nonce of their scripts.
  setResponseHeader(event, 'Content-Security-Policy', `default-src 'none'; frame-ancestors 'none'`)
  // A page is rendered for whoever asks: their name may stand on it, a scenario of theirs perhaps too.
  const open = path === '/' || path === '/sign-in' || path === '/register'
  setResponseHeader(event, 'Cache-Control', open ? 'private, no-cache' : 'no-store')
  if (useRuntimeConfig().public.siteUrl.startsWith('https://')) {
    setResponseHeader(event, 'Strict-Transport-Security', `max-age=${year}; includeSubDomains`)
  }
})
