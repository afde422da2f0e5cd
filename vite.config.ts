import react from '@vitejs/plugin-react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

const serverTests = ['tests/server/**/*.test.ts'];
const browserTests = ['tests/e2e/**/*.test.ts'];

export default defineConfig({
  plugins: [react(), tailwindcss()],
  build: {
    outDir: 'dist/client',
    emptyOutDir: true,
    chunkSizeWarningLimit: 600,
  },
  server: { proxy: { '/api': `http://127.0.0.1:${process.env['PORT'] ?? '5180'}` } },
  test: {
    env: { TZ: 'UTC' },
    projects: [
      {
        extends: true,
        test: { name: 'pure', include: ['tests/{shared,published,tidy,scenarios}/**/*.test.ts'] },
      },
      {
        extends: true,
        test: {
          name: 'server',
          include: serverTests,
          globalSetup: ['tests/setup/database-cluster.ts'],
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'browser',
          include: browserTests,
          globalSetup: ['tests/setup/database-cluster.ts'],
          testTimeout: 180_000,
          hookTimeout: 180_000,
          fileParallelism: false,
        },
      },
    ],
  },
});
