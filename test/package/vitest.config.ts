/** The long suite: builds the package and installs it. `npm run test:package`. */
import { defineConfig } from 'vitest/config';

export default defineConfig({
  root: new URL('../..', import.meta.url).pathname,
  test: { include: ['test/package/*.suite.ts'], testTimeout: 120_000, hookTimeout: 240_000 },
});
