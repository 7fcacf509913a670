import { defineConfig } from 'vitest/config';

const results = process.env['VISVIVA_RESULTS'];

export default defineConfig({
  test: {
    testTimeout: 60_000,
    // All cores: nobody types meanwhile.
    maxWorkers: '100%',
    reporters: results ? ['default', ['json', { outputFile: results }]] : ['default'],
    projects: [
      {
        extends: true,
        test: { name: 'unit', include: ['tests/{unit,languages,published,service}/**/*.test.ts'] },
      },
      {
        extends: true,
        test: {
          name: 'built',
          include: ['tests/{lsp,cli}/**/*.test.ts'],
          globalSetup: ['tests/lsp/build-first.ts'],
        },
      },
      {
        extends: true,
        test: { name: 'property', include: ['tests/{property,fuzz}/**/*.test.ts'], testTimeout: 120_000 },
      },
    ],
  },
});
