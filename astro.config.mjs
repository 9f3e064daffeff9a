import mdx from '@astrojs/mdx';
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'astro/config';

export default defineConfig({
  // The front in src/server/front stands before Astro and serves the static files, so Astro is only a handler.
  output: 'server',
  adapter: node({ mode: 'middleware' }),
  // Each run builds into a folder of its own, so that tests never pull files from under a running site.
  outDir: process.env.BENCHLEAF_DIST ?? 'dist/site',
  integrations: [react(), mdx()],
  security: { checkOrigin: true },
  experimental: {
    // Hashes of our own scripts and styles, and nothing inline besides; the front adds where forms may go.
    csp: {
      directives: [
        "default-src 'none'",
        "img-src 'self' data:",
        "font-src 'self'",
        "connect-src 'self'",
        "worker-src 'self'",
        "manifest-src 'self'",
        "object-src 'none'",
        "base-uri 'none'",
        "frame-ancestors 'none'",
      ],
    },
  },
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    server: { watch: { ignored: ['**/.data/**', '**/dist/**'] } },
    build: { sourcemap: false },
  },
});
