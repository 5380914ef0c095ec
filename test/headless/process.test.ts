import { type ChildProcess, spawn } from 'node:child_process'
import { once } from 'node:events'
import { createServer } from 'node:net'
import { join } from 'node:path'
import { text } from 'node:stream/consumers'
import { describe, expect, test } from 'vitest'

const ROOT = join(import.meta.dirname, '..', '..')
const ROUTINES = join(import.meta.dirname, 'routines')

function npm(words: readonly string[], folder: string, environment: NodeJS.ProcessEnv = {}): ChildProcess {
  const clean = Object.fromEntries(Object.entries(process.env).filter(([name]) => !name.startsWith('npm_')))
  return spawn('npm', ['--prefix', ROOT, 'run', '-s', ...words], {
    cwd: folder,
    env: { ...clean, ...environment },
    // A group of its own, so that the test can end npm and all that npm started.
    detached: true,
  })
}

async function tallyword(words: readonly string[], stdin = '') {
  const child = npm(['tallyword', '--', ...words], ROUTINES)
  child.stdin!.end(stdin)
  const ended = once(child, 'close')
  const [out, error] = await Promise.all([text(child.stdout!), text(child.stderr!)])
  const [exit] = await ended
  return { exit, out, error }
}

describe('the command as a process', () => {
  test('finds files from where it is called, prints the result alone, and passes its exit on', async () => {
    const ended = await Promise.all([
      tallyword(['count', 'total.tally', '--n', '16', '--json']),
      tallyword(['count', '-', '--json'], 'routine one\n  out x\n  claim time = 2\nbegin\n  x <- 1\nend\n'),
      tallyword(['count', 'total.tally']),
      tallyword(
        ['count', 'station.tally', '--routine', 'share', '--set', 'extended', '--input', '-'],
        '{"x": 1, "y": 0}',
      ),
    ])
    expect(ended.map(({ exit }) => exit)).toEqual([0, 1, 2, 3])
    expect(JSON.parse(ended[0]!.out)).toMatchObject({ routine: 'total', n: 16 })
    expect(ended[0]!.error).toBe('')
    expect(JSON.parse(ended[1]!.out)).toMatchObject({ routine: 'one', time: 1 })
    expect(ended[3]!.error).toContain('1 is divided by 0')
  })

  test('ends quietly where its reader has seen enough', async () => {
    const child = npm(['tallyword', '--', 'count', 'order.tally', '--n', '4000', '--w', '64', '--json'], ROUTINES)
    child.stdin!.end()
    const ended = once(child, 'close')
    const error = text(child.stderr!)
    child.stdout!.once('data', () => child.stdout!.destroy())
    await ended
    expect(await error).toBe('')
  })
})

describe('npm start', () => {
  test('builds the page and serves it on the next port that is free', async () => {
    const blocker = createServer().listen(0, 'localhost')
    await once(blocker, 'listening')
    const { port } = blocker.address() as { port: number }
    const child = npm(['start'], ROOT, { PORT: String(port) })
    try {
      let out = ''
      for await (const part of child.stdout!) {
        out += part
        if (/^ +http\S+\/$/m.test(out)) break
      }
      const address = /^ +(http\S+\/)$/m.exec(out)![1]!
      expect(Number(new URL(address).port)).toBeGreaterThan(port)
      const page = await fetch(address)
      expect(page.status).toBe(200)
      expect(await page.text()).toMatch(/<title>.*Tallyword/)
    } finally {
      process.kill(-child.pid!)
      blocker.close()
    }
  })

  test('says what is wrong with a port', async () => {
    const child = npm(['start'], ROOT, { PORT: 'http' })
    const ended = once(child, 'close')
    expect(await text(child.stderr!)).toContain('PORT is http, which is no port')
    expect((await ended)[0]).toBe(2)
  })
})
