import { fileURLToPath } from 'node:url'

const apiErrorHandler = fileURLToPath(new URL('./server/error-handler.ts', import.meta.url))

export default defineNuxtConfig({
  compatibilityDate: '2026-06-01',
  // Everything lives at the top level: a folder named app/ would become the source folder of Nuxt 4.
  srcDir: '.',
  modules: ['@pinia/nuxt', '@nuxtjs/tailwindcss', 'nuxt-auth-utils'],
  components: [{ path: '~/components', pathPrefix: false }],
  imports: { dirs: ['stores', 'composables'] },
  css: ['~/assets/theme.css'],
  devtools: { enabled: false },
  telemetry: false,
  tailwindcss: { cssPath: '~/assets/tailwind.css', viewer: false },
  typescript: { strict: true, typeCheck: false },
  router: { options: { sensitive: true } },
  experimental: { payloadExtraction: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Polewright',
      meta: [
        { name: 'viewport', content: 'width=device-width, initial-scale=1' },
        { name: 'description', content: 'The bench on which controls engineers of motion axes choose loop gains.' },
      ],
    },
  },
  runtimeConfig: {
    databasePath: '.data/polewright.db',
    rateLimits: 'on',
    public: { siteUrl: '' },
  },
  hooks: {
    // Before Nuxt's own error page: failures under /api answer in the form of the contract.
    'nitro:init': (nitro) => {
      nitro.options.errorHandler = [apiErrorHandler, ...[nitro.options.errorHandler].flat()]
    },
  },
  nitro: {
    experimental: { asyncContext: false },
  },
})
