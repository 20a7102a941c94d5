import { defineConfig } from 'vitest/config';

// Tests run over the TypeScript sources of all packages: the condition picks `src` instead of `dist` in every exports map.
export default defineConfig({
  resolve: { conditions: ['tordial-source'] },
  ssr: { resolve: { conditions: ['tordial-source'] } },
  test: {
    include: ['packages/*/src/**/*.test.ts'],
    exclude: ['**/dist/**', '**/node_modules/**'],
    reporters: ['default', './scripts/closing-line.mjs'],
    testTimeout: 120_000,
  },
});
