import { defineConfig } from 'vitest/config';

/** Time zone and locale are fixed so that a test reads the same on every machine. */
const env = { TZ: 'UTC', LANG: 'en_GB.UTF-8', NODE_NO_WARNINGS: '1' };

export default defineConfig({
  test: {
    maxWorkers: 2,
    projects: [
      { test: { name: 'unit', include: ['tests/unit/**/*.test.ts'], environment: 'node', env } },
      { test: { name: 'outside', include: ['tests/outside/**/*.test.ts'], environment: 'node', env } },
      {
        esbuild: { jsx: 'automatic' },
        test: { name: 'component', include: ['tests/component/**/*.test.tsx'], environment: 'jsdom', env },
      },
      {
        test: {
          name: 'service',
          include: ['tests/service/**/*.test.ts'],
          environment: 'node',
          env,
          globalSetup: ['tests/service/global-setup.ts'],
          setupFiles: ['tests/service/use-services.ts'],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
});
