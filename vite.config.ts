/** Builds the pages into dist/web; in development it serves them and passes /api on to the server on PORT. */
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [react(), tailwindcss()],
  publicDir: 'src/public',
  build: {
    outDir: 'dist/web',
    emptyOutDir: true,
    target: 'es2022',
    sourcemap: false,
    // The security policy allows fonts of our own origin only, no data: addresses.
    assetsInlineLimit: 0,
    chunkSizeWarningLimit: 900,
  },
  server: { proxy: { '/api': `http://127.0.0.1:${process.env.PORT ?? 8080}` } },
});
