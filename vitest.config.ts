import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const here = (folder: string) => fileURLToPath(new URL(folder, import.meta.url));

/** Unit and server tests: everything that runs in Node.js. The client's unit tests run through `ng test`. */
export default defineConfig({
  resolve: { alias: { '@shared': here('./shared'), '@drizzle': here('./drizzle') } },
  test: {
    include: [
      'server/**/*.spec.ts',
      'shared/**/*.spec.ts',
      'demo/**/*.spec.ts',
      'drizzle/**/*.spec.ts',
      'scripts/**/*.spec.ts',
    ],
    environment: 'node',
    testTimeout: 30_000,
  },
});
