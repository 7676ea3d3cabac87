import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

export default defineConfig({
  test: {
    // Vitest leaves one core to itself, and of two that is half: these tests wait for ffmpeg and the database more than they compute.
    maxWorkers: '100%',
    projects: [
      { test: { name: 'unit', include: ['tests/unit/**/*.test.ts', 'tests/checks/**/*.test.ts'], environment: 'node' } },
      { test: { name: 'server', include: ['tests/server/**/*.test.ts'], environment: 'node', globalSetup: ['tests/support/globalSetup.ts'], testTimeout: 30_000, hookTimeout: 60_000 } },
      { plugins: [vue()], test: { name: 'components', include: ['tests/components/**/*.test.ts'], environment: 'happy-dom' } },
    ],
  },
})
