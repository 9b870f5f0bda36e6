import { quasar, transformAssetUrls } from '@quasar/vite-plugin'
import vue from '@vitejs/plugin-vue'
import { fileURLToPath } from 'node:url'
import { VitePWA } from 'vite-plugin-pwa'
import { defineConfig } from 'vitest/config'

const here = (path: string): string => fileURLToPath(new URL(path, import.meta.url))
const testing = Boolean(process.env.VITEST)

export default defineConfig({
  root: here('.'),
  build: {
    outDir: here('.build/client'),
    emptyOutDir: true,
    target: 'es2022',
    // A data URL would need a wider content security policy than 'self'.
    assetsInlineLimit: 0,
    chunkSizeWarningLimit: 700,
  },
  cacheDir: here('.build/vite'),
  plugins: [
    vue({ template: { transformAssetUrls } }),
    quasar({ sassVariables: false }),
    !testing &&
      VitePWA({
        strategies: 'injectManifest',
        srcDir: 'src',
        filename: 'sw.ts',
        registerType: 'prompt',
        injectRegister: false,
        manifest: {
          id: '/',
          name: 'Brimline',
          short_name: 'Brimline',
          description: 'Count ward supply bins, with or without signal.',
          start_url: '/',
          scope: '/',
          display: 'standalone',
          background_color: '#F3F6F5',
          theme_color: '#0A5768',
          icons: [
            { src: '/icons/mark.svg', sizes: 'any', type: 'image/svg+xml', purpose: 'any' },
            { src: '/icons/maskable-192.png', sizes: '192x192', type: 'image/png', purpose: 'maskable' },
            { src: '/icons/maskable-512.png', sizes: '512x512', type: 'image/png', purpose: 'maskable' },
            { src: '/icons/icon-192.png', sizes: '192x192', type: 'image/png', purpose: 'any' },
            { src: '/icons/icon-512.png', sizes: '512x512', type: 'image/png', purpose: 'any' },
            { src: '/icons/monochrome.svg', sizes: 'any', type: 'image/svg+xml', purpose: 'monochrome' },
          ],
        },
        injectManifest: {
          globPatterns: ['**/*.{js,css,html,woff2,svg,png,webmanifest}'],
          maximumFileSizeToCacheInBytes: 4_000_000,
        },
      }),
  ],
  server: {
    port: 5173,
    strictPort: true,
    proxy: {
      '/api': { target: process.env.BRIMLINE_API ?? 'http://127.0.0.1:4310' },
      '/healthz': { target: process.env.BRIMLINE_API ?? 'http://127.0.0.1:4310' },
    },
  },
  test: {
    maxWorkers: 2,
    projects: [
      {
        extends: true,
        test: {
          name: 'shared',
          include: ['tests/shared/**/*.test.ts', 'tests/architecture/**/*.test.ts'],
          environment: 'node',
        },
      },
      {
        extends: true,
        test: {
          name: 'server',
          globalSetup: ['tests/support/global-setup.ts'],
          include: ['tests/server/**/*.test.ts'],
          environment: 'node',
          hookTimeout: 60_000,
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: { name: 'client', include: ['tests/client/**/*.test.ts'], environment: 'happy-dom' },
      },
    ],
  },
})
