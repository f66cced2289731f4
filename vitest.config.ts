import { fileURLToPath } from 'node:url'
import { defineVitestProject } from '@nuxt/test-utils/config'
import { defineConfig } from 'vitest/config'

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url))
const alias = { '~': at('./app'), '#shared': at('./shared'), '#server': at('./server') }

/** Four kinds of test; docker-local/test.mjs runs them in this order and counts. */
export default defineConfig({
  test: {
    projects: [
      { resolve: { alias }, test: { name: 'unit', include: ['tests/unit/**/*.spec.ts'], environment: 'node' } },
      await defineVitestProject({ test: { name: 'nuxt', include: ['tests/nuxt/**/*.spec.ts'], environment: 'nuxt', hookTimeout: 60_000 } }),
      { resolve: { alias }, test: { name: 'api', include: ['tests/api/**/*.spec.ts'], environment: 'node', testTimeout: 60_000, hookTimeout: 120_000, fileParallelism: false } },
      { resolve: { alias }, test: { name: 'e2e', include: ['tests/e2e/**/*.spec.ts'], environment: 'node', testTimeout: 180_000, hookTimeout: 180_000, fileParallelism: false } },
    ],
  },
})
