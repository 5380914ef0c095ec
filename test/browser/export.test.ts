import { execFile } from 'node:child_process'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { promisify } from 'node:util'
import type { Locator, Page } from 'playwright-core'
import { describe, expect, test } from 'vitest'
import { openDemo, pasteDraft, setAndSweep, sweepEnds, TOTAL } from './page'

const ROOT = resolve(import.meta.dirname, '../..')

async function take(page: Page, button: Locator): Promise<{ name: string; content: Buffer }> {
  const [download] = await Promise.all([page.waitForEvent('download'), button.click()])
  return { name: download.suggestedFilename(), content: await readFile(await download.path()) }
}

function parseCsv(text: string): Record<string, string>[] {
  expect(text.endsWith('\r\n')).toBe(true)
  const [titles, ...rows] = text
    .trimEnd()
    .split('\r\n')
    .map(line => line.split(','))
  return rows.map(row => Object.fromEntries(titles!.map((title, at) => [title, row[at]!])))
}

/** The page with the two-word sum swept at three sizes and the demo's three widths, with multiplication alone. */
async function openTotal() {
  const opened = await openDemo()
  const { page } = opened
  await pasteDraft(page, TOTAL)
  await page.locator('#slot-sets').click()
  await page.getByLabel(/^without multiplication/).uncheck()
  await page.keyboard.press('Enter')
  await sweepEnds(page)
  await setAndSweep(page, 'sizes', 'Values of n', '100, 200, 400')
  await sweepEnds(page)
  return opened
}

describe('a figure', () => {
  test('is saved as an SVG that stands alone, a marker for each point', async () => {
    const { page, errors, close } = await openTotal()
    const figure = page.getByRole('group', { name: 'Save figure 1' })
    const { name, content } = await take(page, figure.getByRole('button', { name: 'SVG' }))
    expect(name).toBe('total-figure-1.svg')
    const found = await page.evaluate(text => {
      const parsed = new DOMParser().parseFromString(text, 'image/svg+xml')
      const root = parsed.documentElement
      const marks = [...parsed.querySelectorAll('g[transform^="translate"]')]
      return {
        error: parsed.querySelector('parsererror')?.textContent ?? '',
        root: root.localName,
        namespace: root.namespaceURI,
        description: root.querySelector('desc')?.textContent ?? '',
        marks: marks.length,
        colours: [...parsed.querySelectorAll('[fill], [stroke]')].flatMap(each =>
          [each.getAttribute('fill'), each.getAttribute('stroke')].filter(value => value?.includes('var(')),
        ),
        texts: [...parsed.querySelectorAll('text')].map(each => each.textContent),
      }
    }, content.toString('utf8'))
    expect(found).toMatchObject({
      error: '',
      root: 'svg',
      namespace: 'http://www.w3.org/2000/svg',
      marks: 9,
      colours: [],
    })
    expect(found.description).toContain('On a word-RAM with w = 16, 32, 64')
    expect(found.description).toContain('not cycles, not seconds')
    for (const label of ['16', '32', '64', 'claim']) expect(found.texts).toContain(label)
    expect(errors).toEqual([])
    await close()
  })

  test('is saved as a PNG, two pixels to a unit', async () => {
    const { page, errors, close } = await openTotal()
    const drawn = await page.locator('.plate svg.recharts-surface').first().boundingBox()
    const figure = page.getByRole('group', { name: 'Save figure 1' })
    const { name, content } = await take(page, figure.getByRole('button', { name: 'PNG' }))
    expect(name).toBe('total-figure-1.png')
    expect(content.subarray(0, 8).toString('hex')).toBe('89504e470d0a1a0a')
    expect(content.readUInt32BE(16)).toBe(Math.round(drawn!.width) * 2)
    expect(content.readUInt32BE(20)).toBe(Math.round(drawn!.height) * 2)
    expect(errors).toEqual([])
    await close()
  })

  test('is saved as CSV, with the figures of the command', async () => {
    const { page, errors, close } = await openTotal()
    const figure = page.getByRole('group', { name: 'Save figure 1' })
    const drawn = parseCsv((await take(page, figure.getByRole('button', { name: 'CSV' }))).content.toString('utf8'))
    const points = page.locator('#points')
    const all = parseCsv((await take(page, points.getByRole('button', { name: 'CSV' }))).content.toString('utf8'))
    expect(drawn).toHaveLength(9)

    const folder = await mkdtemp(join(tmpdir(), 'tallyword-sweep-'))
    await writeFile(join(folder, 'total.tally'), TOTAL)
    const trials = String(Math.max(...all.map(row => Number(row.trial))))
    const flags = ['--n', '100,200,400', '--w', '16,32,64', '--trials', trials, '--seed', '1', '--out', folder]
    await promisify(execFile)(
      'npm',
      ['run', '-s', 'tallyword', '--', 'sweep', join(folder, 'total.tally'), ...flags],
      { cwd: ROOT },
    )
    const files = await promisify(execFile)('ls', [folder])
    const csv = files.stdout.split('\n').find(file => file.endsWith('.csv'))!
    const commanded = parseCsv(await readFile(join(folder, csv), 'utf8'))
    await rm(folder, { recursive: true })
    const key = (row: Record<string, string>) => `${row.n} ${row.w} ${row.trial} ${row.seed} ${row.time}`
    expect(all.map(key).sort()).toEqual(commanded.map(key).sort())
    for (const { n, w, least, most } of drawn) {
      const times = commanded.filter(row => row.n === n && row.w === w).map(row => Number(row.time))
      expect([Number(least), Number(most)]).toEqual([Math.min(...times), Math.max(...times)])
    }
    expect(errors).toEqual([])
    await close()
  })
})

test('the table of points sorts, and its rows move the reading', async () => {
  const { page, errors, close } = await openTotal()
  await page.getByRole('button', { name: 'Show the table of 9 points' }).click()
  const table = page.locator('.point-table')
  await table.getByRole('button', { name: 'most' }).click()
  await table.locator('th[aria-sort=descending]').waitFor()
  await table.getByRole('button', { name: 'Read n = 400, w = 64', exact: false }).click()
  await expect.poll(() => page.locator('#slot-reading').textContent()).toMatch(/400.*64/)
  expect(errors).toEqual([])
  await close()
})
