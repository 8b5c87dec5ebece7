import react from '@vitejs/plugin-react';
import { defaultClientConditions, defaultServerConditions } from 'vite';
import { defineConfig } from 'vitest/config';

const api = `http://127.0.0.1:${process.env.API_PORT ?? 3000}`;

export default defineConfig({
  plugins: [react()],
  resolve: { conditions: ['foreveil-source', ...defaultClientConditions] },
  ssr: { resolve: { conditions: ['foreveil-source', ...defaultServerConditions] } },
  server: { host: '127.0.0.1', port: 5173, strictPort: true, proxy: { '/api': api } },
  build: { outDir: 'dist', sourcemap: true, chunkSizeWarningLimit: 1200 },
  test: {
    projects: [
      // what needs no page is tested without one, ten times as fast
      { extends: true, test: { name: 'logic', environment: 'node', include: ['src/**/*.spec.ts'] } },
      {
        extends: true,
        test: { name: 'screen', environment: 'jsdom', setupFiles: ['./src/test-setup.ts'], include: ['src/**/*.spec.tsx'] },
      },
    ],
  },
});
