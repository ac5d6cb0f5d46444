import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'astro/config';
import auth from 'auth-astro';

export default defineConfig({
  output: 'server',
  // server.ts is the server: it takes the handler of this build and never lets it listen by itself.
  adapter: node({ mode: 'standalone' }),
  integrations: [react(), auth({ configFile: './auth.config' })],
  security: {
    // The middleware has its own check, which also covers JSON and lets signed webhooks through.
    checkOrigin: false,
    // The host is checked against APP_ORIGIN where it matters; without this Astro takes every request for localhost.
    allowedDomains: [{}],
  },
  devToolbar: { enabled: false },
  vite: { plugins: [tailwindcss()] },
  experimental: {
    csp: {
      algorithm: 'SHA-256',
      directives: [
        "default-src 'self'",
        "img-src 'self' data: blob:",
        "font-src 'self'",
        "connect-src 'self'",
        "object-src 'none'",
        "base-uri 'none'",
        "form-action 'self'",
        "frame-ancestors 'none'",
      ],
    },
  },
});
