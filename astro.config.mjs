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
  // Without this Astro takes its own address as http://localhost and refuses same-origin forms; links are built from the configured base address.
  security: { checkOrigin: true, allowedDomains: [{}] },
  build: { assetsInlineLimit: 0 },
  server: { host: '127.0.0.1', port: 4321 },
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    build: { assetsInlineLimit: 0 },
    ssr: { external: ['better-sqlite3', '@node-rs/argon2', 'sharp', 'pino', 'nodemailer'] },
  },
})
