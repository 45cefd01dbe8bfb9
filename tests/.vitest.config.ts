import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

// Tests read the sources, so a failing line is a line of TypeScript; the spawned commands of tests/cli use dist.
const source = (name: string): string => fileURLToPath(new URL(`../packages/${name}`, import.meta.url));

export default defineConfig({
  root: fileURLToPath(new URL('..', import.meta.url)),
  resolve: {
    alias: {
      '@gapwright/fem-core': source('fem-core/src/index.ts'),
      '@gapwright/machine-models': source('machine-models/src/index.ts'),
      '@gapwright/cli': source('cli/src/main.ts'),
    },
  },
  test: {
    include: ['tests/**/*.test.ts'],
    exclude: ['tests/long/**', '**/node_modules/**'],
    testTimeout: 60_000,
  },
});
