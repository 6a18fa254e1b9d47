import react from '@vitejs/plugin-react';
import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [react()],
  resolve: { alias: { '@strainwright/common': fileURLToPath(new URL('../common/src', import.meta.url)) } },
  server: { port: 4311, proxy: { '/api': 'http://127.0.0.1:4310' } },
  build: { chunkSizeWarningLimit: 700 },
});
