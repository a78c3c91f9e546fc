import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const alias = { '~': fileURLToPath(new URL('./src', import.meta.url)) };

/**
 * Four projects, from quick to slow. Their groups run one after the other, so that a browser never competes with two
 * hundred database tests for the processor: what an end-to-end test waits for is then the product.
 */
export default defineConfig({
  test: {
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'unit',
          environment: 'node',
          include: ['src/**/*.test.{ts,tsx}', 'tests/reference/**/*.test.ts', 'tests/fakes/**/*.test.ts', 'tests/scripts/**/*.test.ts'],
          exclude: ['**/*.dom.test.tsx'],
          sequence: { groupOrder: 0 },
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'dom',
          environment: 'jsdom',
          include: ['src/**/*.dom.test.tsx'],
          sequence: { groupOrder: 1 },
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'db',
          environment: 'node',
          include: ['tests/db/**/*.test.ts'],
          globalSetup: ['tests/setup/database.ts'],
          pool: 'forks',
          testTimeout: 20_000,
          hookTimeout: 60_000,
          sequence: { groupOrder: 2 },
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'e2e',
          environment: 'node',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/setup/database.ts'],
          pool: 'forks',
          // Each file has an application server and a browser of its own.
          maxWorkers: 2,
          testTimeout: 90_000,
          hookTimeout: 120_000,
          sequence: { groupOrder: 3 },
        },
      },
    ],
  },
});
