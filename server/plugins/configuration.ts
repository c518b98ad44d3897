/** A wrong setting ends the start with one clear sentence, rather than a request later on. */
export default defineNitroPlugin(() => {
  const { public: { siteUrl }, rateLimits } = useRuntimeConfig()
  if (siteUrl !== '' && !/^https?:\/\//.test(siteUrl)) throw new Error(`NUXT_PUBLIC_SITE_URL must begin with http:// or https://, not "${siteUrl}".`)
  if (siteUrl !== '' && !URL.canParse(siteUrl)) throw new Error(`NUXT_PUBLIC_SITE_URL is no address: "${siteUrl}".`)
  if (rateLimits !== 'on' && rateLimits !== 'off') throw new Error(`NUXT_RATE_LIMITS is "on" or "off", not "${String(rateLimits)}".`)
})
