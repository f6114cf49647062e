import node from '@astrojs/node'
import react from '@astrojs/react'
import tailwindcss from '@tailwindcss/vite'
import { defineConfig } from 'astro/config'

export default defineConfig({
  output: 'server',
  // Served by src/server/serve.mjs, which adds compression, static files and the body limit.
  adapter: node({ mode: 'middleware' }),
  integrations: [react()],
  // Sessions are Lucia's, over Kysely.
  session: { driver: 'null' },
  // The middleware refuses cross-site writes of every kind; the framework's check would also refuse a mail program's
  // one-click unsubscribe, which has no Origin (RFC 8058).
  security: { checkOrigin: false },
  // Hashes of each page's own scripts and styles; `security-headers.ts` adds what cannot be said here.
  experimental: {
    csp: {
      directives: [
        "default-src 'self'",
        "img-src 'self' data:",
        "object-src 'none'",
        // The card's service worker.
        "worker-src 'self'",
        "base-uri 'none'",
        "form-action 'self'",
        "frame-ancestors 'none'",
      ],
    },
  },
  build: { assetsInlineLimit: 0 },
  server: { host: '127.0.0.1', port: 4321 },
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    build: { assetsInlineLimit: 0 },
    ssr: { external: ['better-sqlite3', '@node-rs/argon2', 'sharp', 'pino', 'nodemailer'] },
  },
})
