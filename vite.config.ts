import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const api = `http://127.0.0.1:${process.env.PORT ?? 4310}`;

export default defineConfig({
  plugins: [react(), tailwindcss()],
  server: {
    port: 4311,
    strictPort: true,
    proxy: { '/api': { target: api, ws: true } },
  },
  // Fonts are files of their own: the content security policy allows no data: fonts.
  build: { outDir: 'dist/client', chunkSizeWarningLimit: 1200, sourcemap: true, assetsInlineLimit: 0 },
  test: {
    reporters: ['default', './tests/support/plain-reporter.ts'],
    include: ['tests/{unit,reference,integration,simulation}/**/*.test.{ts,tsx}'],
    environment: 'node',
    testTimeout: 30_000,
    hookTimeout: 60_000,
    pool: 'forks',
    maxWorkers: 2,
    setupFiles: ['./tests/support/setup.ts'],
  },
});
