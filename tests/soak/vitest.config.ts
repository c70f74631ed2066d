import { defineConfig } from 'vitest/config';

/** `npm run soak`: the large counts of the issues, without a time limit; `npm run soak -- NAME` for one of them. */
export default defineConfig({
  test: {
    include: ['tests/soak/**/*.soak.ts'],
    expect: { requireAssertions: true },
    allowOnly: false,
    testTimeout: 0,
    hookTimeout: 0,
  },
});
