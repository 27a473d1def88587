import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

/** `data:` URLs and inline scripts stay out, so that the page runs under `default-src 'self'`. */
export default defineConfig({
  root: 'frontend',
  plugins: [react(), tailwindcss()],
  build: {
    outDir: '../dist/client',
    emptyOutDir: true,
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    chunkSizeWarningLimit: 5000,
  },
  worker: { format: 'es' },
  server: {
    port: Number(process.env['VESSELRY_CLIENT_PORT'] ?? 5173),
    proxy: { '/api': process.env['VESSELRY_API'] ?? 'http://127.0.0.1:8080' },
  },
});
