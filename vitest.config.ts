/** One project a kind of test; tests/setup holds what they stand on. */
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const vigilance = 'tests/setup/vigilance.ts';
const database = 'tests/setup/template-database.js';

export default defineConfig({
  test: {
    // The machines this is made for have two cores.
    maxWorkers: 2,
    teardownTimeout: 20_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.{ts,js}'],
          environment: 'node',
          setupFiles: [vigilance],
          testTimeout: 20_000,
        },
      },
      {
        extends: true,
        // Waits for Python, and for refinement studies that need many nodes.
        test: {
          name: 'reference',
          include: ['tests/reference/**/*.test.ts'],
          environment: 'node',
          setupFiles: [vigilance],
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/api/**/*.test.{ts,js}'],
          environment: 'node',
          globalSetup: [database],
          setupFiles: [vigilance],
          testTimeout: 30_000,
          hookTimeout: 30_000,
        },
      },
      {
        extends: true,
        plugins: [react()],
        test: {
          name: 'web',
          include: ['tests/web/**/*.test.{ts,tsx}', 'src/**/*.test.{ts,tsx}'],
          environment: 'jsdom',
          setupFiles: [vigilance, 'tests/setup/pages.ts'],
          testTimeout: 20_000,
        },
      },
      {
        extends: true,
        // Each file starts the built application and Chromium: one at a time, after all others.
        test: {
          name: 'browser',
          include: ['tests/browser/**/*.test.ts'],
          environment: 'node',
          globalSetup: [database, 'tests/setup/built-application.js'],
          setupFiles: [vigilance],
          fileParallelism: false,
          maxWorkers: 1,
          sequence: { groupOrder: 1 },
          testTimeout: 180_000,
          hookTimeout: 180_000,
        },
      },
    ],
  },
});
