import { defineConfig, mergeConfig } from 'vitest/config';
import usual from './.vitest.config.js';

// The tests that take minutes: `npm run test:long`.
const { include: _, exclude: __, ...test } = usual.test ?? {};

export default mergeConfig(
  { ...usual, test },
  defineConfig({ test: { include: ['tests/long/**/*.test.ts'], testTimeout: 3_600_000 } }),
);
