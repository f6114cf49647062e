/** The web process: static files, compression and the body limit in front of the built site. X-Forwarded-* is not trusted. */
import { createServer } from 'node:http'
import compression from 'compression'
import sirv from 'sirv'
import { processConfig } from '../../dist/lib/config.mjs'
import { inRoot } from './paths.mjs'

/** Above the API's own limit of 4 MB, so that its readable answer comes first. */
const BODY_LIMIT_BYTES = 5 * 1024 * 1024
const STOP_PATIENCE_MS = 8_000

const { handler } = await import('../../dist/server/entry.mjs')
const config = processConfig()

const compress = compression()
const files = sirv(inRoot('dist/client'), {
  etag: true,
  setHeaders(response, path) {
    // Only what Astro named by its content may be kept for ever.
    response.setHeader('cache-control', path.startsWith('/_astro/') ? 'public, max-age=31536000, immutable' : 'public, max-age=3600')
    response.setHeader('x-content-type-options', 'nosniff')
    response.setHeader('cross-origin-resource-policy', 'same-origin')
    // A picture opened as a page may neither run nor load anything.
    response.setHeader('content-security-policy', "default-src 'none'; style-src 'unsafe-inline'; sandbox")
  },
})

function answer(response, status, words) {
  response.writeHead(status, { 'content-type': 'text/plain; charset=utf-8', connection: 'close', 'x-content-type-options': 'nosniff' })
  response.end(words)
}

/** A length that is stated is enforced by the HTTP parser, so only stated lengths are let in. */
function isTooLarge(request, response) {
  if (Number(request.headers['content-length'] ?? 0) > BODY_LIMIT_BYTES) {
    answer(response, 413, `The upload is over ${BODY_LIMIT_BYTES / 1024 / 1024} MB. Nothing was changed. Send a smaller one.`)
    return true
  }
  if (request.headers['transfer-encoding'] !== undefined) {
    answer(response, 411, 'State the length of what you send (Content-Length). Nothing was changed.')
    return true
  }
  return false
}

const server = createServer((request, response) => {
  if (isTooLarge(request, response)) return
  for (const name of Object.keys(request.headers)) if (name === 'forwarded' || name.startsWith('x-forwarded-')) delete request.headers[name]
  compress(request, response, () => {
    files(request, response, () => {
      // Without a next step of ours Astro answers unknown addresses itself, with the product's own page.
      void handler(request, response)
    })
  })
})
server.requestTimeout = 60_000
server.on('error', (error) => {
  console.error(
    error.code === 'EADDRINUSE'
      ? `Port ${config.port} is taken. Stop what uses it, or choose another: DWELLHOUR_PORT=4400 npm start`
      : `The server could not listen: ${error.message}`,
  )
  process.exit(1)
})
server.listen(config.port, config.host, () => {
  console.log(`Dwellhour is at ${config.baseUrl}`)
  process.send?.('listening')
})

function stop() {
  server.close(() => process.exit(0))
  server.closeIdleConnections()
  setTimeout(() => process.exit(0), STOP_PATIENCE_MS).unref()
}
process.once('SIGTERM', stop)
process.once('SIGINT', stop)
// A start script that dies takes its server with it.
process.once('disconnect', stop)
