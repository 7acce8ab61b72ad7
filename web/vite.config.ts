import react from '@vitejs/plugin-react'
import { defineConfig } from 'vitest/config'
import packageJson from './package.json' with { type: 'json' }
import { precompress } from './build/precompress.ts'

const conditions = ['source', 'module', 'browser', 'development|production']

export default defineConfig({
  plugins: [react(), precompress()],
  resolve: { conditions },
  // shown on the page that says how the installation stands
  define: { 'import.meta.env.VITE_VERSION': JSON.stringify(packageJson.version) },
  server: {
    // the API's address while developing; set by `npm run dev`
    proxy: {
      '/api': { target: process.env['WEIRLIGHT_API'] ?? 'http://127.0.0.1:3000', changeOrigin: false },
    },
  },
  build: {
    target: 'es2022',
    sourcemap: false,
    // the bench reads from it what a page loads
    manifest: true,
    // no inlined data: addresses, so that the content security policy can stay at 'self'
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    chunkSizeWarningLimit: 700,
    rolldownOptions: {
      output: {
        codeSplitting: {
          groups: [
            {
              name: 'react',
              test: /node_modules[\\/](react|react-dom|scheduler|react-router|react-router-dom)[\\/]/,
            },
            { name: 'charts', test: /node_modules[\\/](echarts|zrender)[\\/]/ },
          ],
        },
      },
    },
  },
  test: {
    css: false,
    projects: [
      {
        extends: true,
        // tests without a page resolve as a server does: the workspace's sources there too, built or not
        ssr: { resolve: { conditions, externalConditions: conditions } },
        test: { name: 'plain', include: ['src/**/*.spec.ts'], environment: 'node' },
      },
      {
        extends: true,
        test: {
          name: 'drawn',
          include: ['src/**/*.spec.tsx'],
          environment: 'jsdom',
          setupFiles: ['src/testing/set-up.ts'],
          // antd's styles make the drawn tests slow on a machine that does much else
          testTimeout: 30_000,
        },
      },
    ],
  },
})
