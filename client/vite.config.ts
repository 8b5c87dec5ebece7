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
  test: { environment: 'jsdom', setupFiles: ['./src/test-setup.ts'], include: ['src/**/*.spec.{ts,tsx}'] },
});
