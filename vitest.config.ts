import { fileURLToPath } from 'node:url'
import { defineVitestProject } from '@nuxt/test-utils/config'
import { defineConfig } from 'vitest/config'

const alias = { '#shared': fileURLToPath(new URL('./shared', import.meta.url)) }
const machine = { globalSetup: ['tests/support/global-setup.ts'], testTimeout: 60_000, hookTimeout: 60_000 }

export default defineConfig(async () => ({
  test: {
    maxWorkers: 2,
    projects: [
      { resolve: { alias }, test: { name: 'unit', include: ['tests/unit/**/*.test.ts'], environment: 'node', testTimeout: 60_000 } },
      await defineVitestProject({ test: { name: 'component', include: ['tests/component/**/*.test.ts'], environment: 'nuxt', testTimeout: 30_000, hookTimeout: 60_000, environmentOptions: { nuxt: { domEnvironment: 'happy-dom' } } } }),
      { resolve: { alias }, test: { name: 'integration', include: ['tests/integration/**/*.test.ts'], environment: 'node', ...machine } },
      { resolve: { alias }, test: { name: 'e2e', include: ['tests/e2e/**/*.test.ts'], environment: 'node', ...machine, testTimeout: 120_000 } },
    ],
  },
}))
