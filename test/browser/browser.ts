import { resolve } from 'node:path'
import { type Browser, chromium, type Page } from 'playwright-core'
import { type PreviewServer, preview } from 'vite'
import { afterAll } from 'vitest'
import { findChromium } from './chromium'

const ROOT = resolve(import.meta.dirname, '../..')

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

export interface OpenOptions {
  /** Of the window, in CSS pixels; 1280 x 900 where absent. */
  readonly width?: number
  readonly height?: number
  readonly dark?: boolean
  /** What follows the app's address: a query, a fragment. */
  readonly path?: string
}

export interface OpenedWorkbench {
  readonly page: Page
  /** Console errors and uncaught exceptions so far. */
  readonly errors: readonly string[]
  /** Closes the page and its profile; throws where the page asked for anything outside the app's own origin. */
  close(): Promise<void>
}

let server: Promise<{ server: PreviewServer; address: string }> | undefined
let browser: Promise<Browser> | undefined

/** Opens the built page in a profile of its own. Browser and server start once a test file and end with it. */
export async function openWorkbench(options: OpenOptions = {}): Promise<OpenedWorkbench> {
  const { width = 1280, height = 900, dark = false, path = '' } = options
  server ??= serve()
  browser ??= launch()
  const { address } = await server
  const context = await (await browser).newContext({
    viewport: { width, height },
    colorScheme: dark ? 'dark' : 'light',
    acceptDownloads: true,
  })
  const errors: string[] = []
  const strays: string[] = []
  await context.route(
    url => url.protocol.startsWith('http') && url.origin !== new URL(address).origin,
    async route => {
      strays.push(route.request().url())
      await route.abort()
    },
  )
  const page = await context.newPage()
  page.on('console', message => {
    if (message.type() === 'error') errors.push(message.text())
  })
  page.on('pageerror', error => errors.push(String(error.stack ?? error)))
  await page.goto(address + path)
  return {
    page,
    errors,
    async close() {
      await context.close()
      if (strays.length > 0) throw new Error(`The page left its origin: ${strays.join(', ')}`)
    },
  }
}

async function serve() {
  const started = await preview({ root: ROOT, logLevel: 'error', preview: { host: '127.0.0.1', port: 0 } })
  const address = started.resolvedUrls?.local[0]
  if (!address) throw new Error('The server gave no address.')
  return { server: started, address }
}

async function launch() {
  const executablePath = findChromium()
  if (!executablePath) throw new Error('No Chromium: run npm test, which finds or installs one.')
  return chromium.launch({ executablePath, headless: true, args: FLAGS })
}

afterAll(async () => {
  await (await browser)?.close()
  await (await server)?.server.close()
})
