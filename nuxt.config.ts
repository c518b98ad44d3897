import { fileURLToPath } from 'node:url'
import { readMigrationFiles } from 'drizzle-orm/migrator'

const migrationsFolder = fileURLToPath(new URL('./server/database/migrations', import.meta.url))
const apiErrorHandler = fileURLToPath(new URL('./server/error-handler.ts', import.meta.url))

export default defineNuxtConfig({
  compatibilityDate: '2026-06-01',
  // Everything lives at the top level: a folder named app/ would become the source folder of Nuxt 4.
  srcDir: '.',
  modules: ['@pinia/nuxt', '@nuxtjs/tailwindcss', 'nuxt-auth-utils'],
  components: [{ path: '~/components', pathPrefix: false, extensions: ['vue'] }],
  imports: { dirs: ['stores', 'composables'] },
  css: ['~/assets/theme.css', '~/assets/print.css'],
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
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/favicon.svg' }],
      meta: [
        { name: 'viewport', content: 'width=device-width, initial-scale=1' },
        { name: 'description', content: 'The bench on which controls engineers of motion axes choose loop gains.' },
      ],
    },
  },
  // The session store of this application answers who is signed in; the module's own client fetch is not needed.
  auth: { loadStrategy: 'none', hash: { scrypt: { cost: 16384, blockSize: 8, parallelization: 5, maxMemory: 64 * 1024 * 1024 } } },
  vite: {
    // vue-konva asks for all of Konva for one flag; the plane draws with the core alone, 28 kB less for every visitor.
    resolve: { alias: [{ find: /^konva$/, replacement: 'konva/lib/Core' }] },
  },
  runtimeConfig: {
    session: { name: 'polewright', password: '', maxAge: 60 * 60 * 24 * 30, cookie: { sameSite: 'lax', secure: false } },
    databasePath: '.data/polewright.db',
    rateLimits: 'on',
    trustProxy: false,
    public: { siteUrl: '' },
  },
  hooks: {
    // Before Nuxt's own error page: failures under /api answer in the form of docs/http-contract.md.
    'nitro:init': (nitro) => {
      nitro.options.errorHandler = [apiErrorHandler, ...[nitro.options.errorHandler].flat()]
      const routes = () => nitro.scannedHandlers.filter(({ route }) => route?.startsWith('/api/')).map(({ route, method }) => ({ route, method }))
      nitro.options.virtual['#api-routes'] = () => `export default ${JSON.stringify(routes())}`
    },
  },
  // Static files are served before any handler of ours.
  routeRules: { '/**': { headers: { 'X-Content-Type-Options': 'nosniff' } } },
  nitro: {
    virtual: { '#migrations': () => `export default ${JSON.stringify(readMigrationFiles({ migrationsFolder }))}` },
  },
})
