import { sveltekit } from '@sveltejs/kit/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  plugins: [sveltekit()],
  worker: { format: 'es' },
  // Small fonts would be written into the styles as data: addresses, which the content policy refuses.
  build: { assetsInlineLimit: 0 },
  test: {
    reporters: ['default'],
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          environment: 'node',
          include: [
            'src/**/*.test.ts',
            'tests/*.test.ts',
            'tests/reference/**/*.test.ts',
            'tests/properties/**/*.test.ts'
          ],
          exclude: ['src/**/*.db.test.ts'],
          testTimeout: 60_000
        }
      },
      {
        extends: true,
        test: {
          name: 'integration',
          environment: 'node',
          include: ['src/**/*.db.test.ts', 'tests/api/**/*.test.ts'],
          globalSetup: ['tests/harness/globalPostgres.ts'],
          setupFiles: ['tests/harness/setupDatabase.ts'],
          testTimeout: 60_000,
          hookTimeout: 120_000
        }
      }
    ]
  }
});
