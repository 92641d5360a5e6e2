import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'astro/config';
import auth from 'auth-astro';
import { fileURLToPath } from 'node:url';

const port = Number(process.env.PORT || 4321);
const publicUrl = process.env.PUBLIC_URL ? new URL(process.env.PUBLIC_URL) : undefined;

/** The front server sends stored files in production; under `astro dev` the same code does it from here. */
const storedFiles = {
  name: 'stored-files',
  configureServer(server) {
    server.middlewares.use(async (req, res, next) => {
      const { deliverInDevelopment } = await server.ssrLoadModule('/src/launch/front/development.ts');
      deliverInDevelopment(req, res);
      next();
    });
  },
};

/**
 * The pages' policy forbids code made from text. zod tries whether it may make some, which the browser reports as a
 * violation, unless it is told not to before its first schema is built.
 */
const zodWithoutEval = {
  name: 'zod-without-eval',
  transform(code, id, options) {
    if (options?.ssr || !id.includes('/zod/v4/core/core.js')) return undefined;
    const told = code.replace('__zod_globalConfig = {}', '__zod_globalConfig = { jitless: true }');
    if (told === code)
      throw new Error('zod begins its settings differently now; see zodWithoutEval in astro.config.mjs');
    return told;
  },
};

export default defineConfig({
  ...(publicUrl && { site: publicUrl.origin }),
  output: 'static',
  adapter: node({ mode: 'middleware' }),
  // Our own endpoint uses auth-astro's handlers; the one it would add lets a GET spend a mailed link.
  integrations: [
    react(),
    auth({
      injectEndpoints: false,
      configFile: fileURLToPath(new URL('src/server/auth/astro-auth.ts', import.meta.url)),
    }),
  ],
  devToolbar: { enabled: false },
  server: { port, host: '127.0.0.1' },
  // Without this list Astro takes every request for `http://localhost` and refuses each form POST. No port means any port.
  security: {
    checkOrigin: true,
    allowedDomains: [
      { hostname: 'localhost', protocol: 'http' },
      { hostname: '127.0.0.1', protocol: 'http' },
      ...(publicUrl ? [{ hostname: publicUrl.hostname, protocol: publicUrl.protocol.replace(':', '') }] : []),
    ],
  },
  // The front server adds what a page's own <meta> cannot carry: frame-ancestors, form-action.
  experimental: {
    csp: {
      directives: [
        "default-src 'self'",
        "img-src 'self' blob: data:",
        "font-src 'self'",
        "connect-src 'self'",
        "media-src 'self' blob:",
        "worker-src 'self'",
        "manifest-src 'self'",
        "object-src 'none'",
        "frame-src 'none'",
        "base-uri 'none'",
      ],
    },
  },
  vite: {
    plugins: [tailwindcss(), storedFiles, zodWithoutEval],
    // Astro 5 carries zod 3; bundling keeps the server on the zod 4 that the source imports.
    ssr: { noExternal: ['zod'] },
    worker: { format: 'es' },
    server: {
      strictPort: true,
      watch: { ignored: ['**/.data/**', '**/dist/**', '**/.shots/**', '**/tests/**', '**/coverage/**'] },
    },
  },
});
