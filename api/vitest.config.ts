import swc from 'unplugin-swc'
import { defineConfig } from 'vitest/config'

// Nest finds its constructor arguments by decorator metadata, which esbuild does not write.
const shared = {
  plugins: [
    swc.vite({
      swcrc: false,
      jsc: {
        parser: { syntax: 'typescript', decorators: true },
        transform: { legacyDecorator: true, decoratorMetadata: true, useDefineForClassFields: false },
        target: 'es2022',
        keepClassNames: true,
      },
      module: { type: 'es6' },
    }),
  ],
  resolve: { conditions: ['source'] },
  ssr: { resolve: { conditions: ['source'] } },
}

export default defineConfig({
  test: {
    projects: [
      {
        ...shared,
        test: {
          name: 'small',
          environment: 'node',
          include: ['src/**/*.spec.ts'],
          exclude: ['src/**/*.db.spec.ts', '**/node_modules/**'],
        },
      },
      {
        ...shared,
        test: {
          name: 'db',
          environment: 'node',
          include: ['src/**/*.db.spec.ts'],
          globalSetup: ['src/testing/template-database.ts'],
          pool: 'forks',
          // loading the application once for each worker, not for each file; they wait for PostgreSQL much of the time
          isolate: false,
          maxWorkers: 3,
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
})
