import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [react(), tailwindcss()],
  publicDir: 'src/public',
  build: { outDir: 'dist/client', target: 'es2023' },
  server: {
    host: process.env.HOST ?? '127.0.0.1',
    strictPort: true,
    proxy: {
      '/api': {
        target: process.env.PERHERTZ_API_URL ?? `http://127.0.0.1:${process.env.PORT ?? 4173}`,
        // The server takes writes only from pages of its own host, so that it must see the browser's.
        changeOrigin: false,
      },
    },
  },
});
