import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    include: ['tests/{unit,languages,published,property,service,cli,fuzz}/**/*.test.ts'],
    testTimeout: 30_000,
  },
});
