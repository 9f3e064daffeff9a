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
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    server: { watch: { ignored: ['**/.data/**', '**/dist/**'] } },
    build: { sourcemap: false },
  },
});
