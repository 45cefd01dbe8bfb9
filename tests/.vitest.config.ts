import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

// Tests read the sources, so a failing line is a line of TypeScript; the spawned commands of tests/cli use dist.
const source = (name: string): string => fileURLToPath(new URL(`../packages/${name}`, import.meta.url));

export default defineConfig({
  root: fileURLToPath(new URL('..', import.meta.url)),
  resolve: {
    alias: [
      { find: /^@gapwright\/fem-core$/, replacement: source('fem-core/src/index.ts') },
      { find: /^@gapwright\/fem-core\//, replacement: source('fem-core/src/entries/') },
      { find: '@gapwright/machine-models', replacement: source('machine-models/src/index.ts') },
      { find: '@gapwright/cli', replacement: source('cli/src/main.ts') },
    ],
  },
  test: {
    include: ['tests/**/*.test.ts'],
    setupFiles: [fileURLToPath(new URL('../packages/cli/src/fused-products.ts', import.meta.url))],
    exclude: ['tests/long/**', '**/node_modules/**'],
    testTimeout: 60_000,
    maxWorkers: 2, // the default leaves a core idle where there are two
  },
});
