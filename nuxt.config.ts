import { fileURLToPath } from 'node:url'

export default defineNuxtConfig({
  modules: [
    '@nuxt/eslint',
    '@nuxtjs/tailwindcss',
    '@pinia/nuxt',
    '@vueuse/nuxt',
    '@sidebase/nuxt-auth',
    'nuxt-security',
  ],
  // Our own code is imported by name, so that a linter sees every import.
  imports: { scan: false },
  // Only .vue is a component: the small functions beside them are imported by name.
  components: [{ path: '~/components', extensions: ['vue'] }],
  devtools: { enabled: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      meta: [{ name: 'theme-color', content: '#14285e' }],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/icon.svg' }],
    },
  },
  css: [
    '@fontsource-variable/archivo/standard.css',
    '@fontsource-variable/red-hat-mono/wght.css',
    '~/assets/css/main.css',
  ],
  runtimeConfig: {
    // Each is overridden by NUXT_<NAME>; server/utils/config.ts checks them at start.
    authSecret: '',
    databaseUrl: '',
    role: 'both',
    migrateOnStart: true,
    demoNow: '',
    mailUrl: '',
    mailFrom: '',
    publicUrl: '',
    storageEndpoint: '',
    storagePublicEndpoint: '',
    storageRegion: '',
    storageBucket: '',
    storageAccessKey: '',
    storageSecretKey: '',
  },
  experimental: {
    typedPages: true,
    // A link brings the page behind it when a finger or pointer comes to it, not when it is merely seen: a first visit stays small.
    defaults: { nuxtLink: { prefetchOn: { visibility: false, interaction: true } } },
  },
  compatibilityDate: '2026-01-01',
  nitro: {
    imports: false as never,
    // Read as files, not imported: the letters of receipts.
    externals: { traceInclude: ['DejaVuSans', 'DejaVuSans-Bold'].map(name => fileURLToPath(new URL(`node_modules/dejavu-fonts-ttf/ttf/${name}.ttf`, import.meta.url))) },
    esbuild: { options: { target: 'node20' } },
    compressPublicAssets: { gzip: true, brotli: true },
  },
  vite: {
    build: { target: 'es2022' },
    optimizeDeps: { include: ['vee-validate', '@vee-validate/zod', 'zod', 'd3-shape', 'd3-scale', 'idb'] },
  },
  typescript: {
    strict: true,
    tsConfig: {
      compilerOptions: { noUncheckedIndexedAccess: true },
      exclude: ['../tests/**', '../scripts/**', '../docker/**', '../server/**'],
    },
  },
  hooks: {
    // Nor is a page loaded ahead because rollup put it into a chunk with something it shares: Nuxt knows pages by their file alone, and would name such a chunk on every page.
    'build:manifest': (manifest) => {
      for (const chunk of Object.values(manifest)) if (chunk.isEntry) chunk.dynamicImports = []
    },
  },
  telemetry: false,
  auth: {
    originEnvKey: 'AUTH_ORIGIN',
    provider: { type: 'authjs', trustHost: false, defaultProvider: 'credentials', addDefaultCallbackUrl: true },
    globalAppMiddleware: false,
  },
  security: {
    headers: {
      contentSecurityPolicy: {
        // server/plugins/05.storage-policy.ts adds the storage's origin, which is known only at start.
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'upgrade-insecure-requests': false,
      },
      permissionsPolicy: { camera: ['self'], fullscreen: ['self'] },
      crossOriginEmbedderPolicy: false,
    },
    rateLimiter: false,
    requestSizeLimiter: false,
    xssValidator: false,
    corsHandler: false,
  },
  tailwindcss: { cssPath: false, viewer: false, exposeConfig: false },
})
