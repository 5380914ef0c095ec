import { resolve } from 'node:path'
import { build, preview } from 'vite'

// `npm start`: builds the page and serves it on this machine alone, on PORT or the next port that is free.

const DEFAULT_PORT = 4680
const root = resolve(import.meta.dirname, '../..')

const wanted = process.env.PORT
const port = wanted === undefined || wanted === '' ? DEFAULT_PORT : Number(wanted)
if (!Number.isInteger(port) || port < 1 || port > 65535) {
  console.error(`PORT is ${wanted}, which is no port; give a whole number from 1 to 65535.`)
  process.exit(2)
}

await build({ root, logLevel: 'warn' })
const server = await preview({ root, logLevel: 'warn', preview: { port, open: false } })
console.log(`\nTallyword is at\n\n    ${server.resolvedUrls?.local[0]}\n\nCtrl+C stops it.`)
