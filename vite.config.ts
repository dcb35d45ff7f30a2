import path from 'node:path';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const here = (folder: string): string => path.resolve(import.meta.dirname, folder);
const alias = { '@shared': here('shared'), '@server': here('server'), '@': here('src') };

export default defineConfig({
  plugins: [react(), tailwindcss()],
  resolve: { alias },
  build: {
    outDir: 'dist',
    manifest: true,
    target: 'es2022',
    chunkSizeWarningLimit: 800,
    assetsInlineLimit: 0,
  },
  test: {
    globals: false,
    testTimeout: 20_000,
    hookTimeout: 30_000,
    maxWorkers: 2,
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'node',
          environment: 'node',
          pool: 'forks',
          include: ['tests/{unit,reference,architecture,api}/**/*.test.ts'],
          globalSetup: ['tests/support/global-setup.ts'],
          setupFiles: ['tests/support/node-setup.ts'],
        },
      },
      {
        plugins: [react()],
        resolve: { alias },
        test: {
          name: 'ui',
          environment: 'jsdom',
          include: ['tests/ui/**/*.test.tsx'],
          setupFiles: ['tests/support/ui-setup.ts'],
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'browser',
          environment: 'node',
          pool: 'forks',
          fileParallelism: false,
          testTimeout: 180_000,
          hookTimeout: 180_000,
          include: ['tests/browser/**/*.test.ts'],
        },
      },
    ],
  },
});
