import { defineConfig } from 'vitest/config';

/** Runs of minutes: `npm run test:long`. */
export default defineConfig({
  root: new URL('..', import.meta.url).pathname,
  test: { include: ['test/**/*.long.ts'], testTimeout: 1_800_000, hookTimeout: 60_000 },
});
