import { fileURLToPath } from 'node:url';
import mdx from '@astrojs/mdx';
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'astro/config';

// Astro compares the Origin of a form with the site's own address, which it believes only when it is named at build time. The front makes the
// same comparison, more strictly, for every request that changes something, whether or not the address was known here.
const site = process.env.SITE_URL ? new URL(process.env.SITE_URL) : null;
const allowedDomains = site
  ? [
      {
        protocol: site.protocol.slice(0, -1),
        hostname: site.hostname,
        ...(site.port ? { port: site.port } : {}),
      },
    ]
  : [];

export default defineConfig({
  // The front in src/server/front stands before Astro and serves the static files, so Astro is only a handler.
  output: 'server',
  adapter: node({ mode: 'middleware' }),
  // Each run builds into a folder of its own, so that tests never pull files from under a running site.
  outDir: process.env.BENCHLEAF_DIST ?? 'dist/site',
  integrations: [react(), mdx()],
  security: { checkOrigin: site !== null, allowedDomains },
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
  // Highlighted code carries inline styles, which the policy of our pages forbids.
  markdown: { syntaxHighlight: false },
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    // In browsers this package decodes entities through the document, which the compiling worker has not; Node's form needs none.
    resolve: {
      alias: {
        'decode-named-character-reference': fileURLToPath(
          import.meta.resolve('decode-named-character-reference'),
        ),
      },
    },
    server: { watch: { ignored: ['**/.data/**', '**/dist/**'] } },
    build: { sourcemap: false },
  },
});
