import { execFile } from 'node:child_process'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { promisify } from 'node:util'
import type { Locator } from 'playwright-core'
import { describe, expect, test } from 'vitest'
import { openWorkbench } from './browser'
import {
  codeOf,
  countAt,
  draftText,
  openDemo,
  outcomes,
  pasteDraft,
  SOON,
  said,
  setAndSweep,
  sweepEnds,
  TOTAL,
} from './page'

const ROOT = resolve(import.meta.dirname, '../..')

describe('the demo', () => {
  test('is swept on the first open, every point of it', async () => {
    const { page, errors, close } = await openDemo()
    const found = await outcomes(page)
    expect(found.waiting).toBeUndefined()
    expect(Object.values(found).reduce((sum, count) => sum + count)).toBe(66)
    expect(found.holds).toBeGreaterThan(30)
    expect(found.broken).toBeGreaterThan(0)
    // At w = 16 an index of 2^16 does not fit a word, with and without multiplication.
    expect(found.refused).toBe(2)
    await expect.poll(() => said(page.locator('.status')), SOON).toMatch(/^64 of 66 points, 128 tallies, /)
    expect(errors).toEqual([])
    await close()
  })

  test('has its product expanded without multiplication, or refused at its line', async () => {
    const { page, errors, close } = await openDemo()
    await page.locator('[role=gridcell]').nth(40).click()
    await page.locator('.margin em', { hasText: 'expanded' }).first().waitFor()
    await page.locator('#slot-sets').click()
    await page.getByLabel('is refused').check()
    await page.keyboard.press('Enter')
    await sweepEnds(page)
    const found = await outcomes(page)
    expect(found.refused).toBe(34)
    await page.locator('[data-outcome=refused]').last().focus()
    await expect.poll(() => said(page.locator('.points-remark')), SOON).toMatch(/not run.*line 19 uses multiply/i)
    await expect
      .poll(() => said(page.locator('.sentence')), SOON)
      .toMatch(/without multiplication, refused where off/)
    expect(errors).toEqual([])
    await close()
  })

  test('has a second routine, which is picked by name', async () => {
    const { page, errors, close } = await openDemo()
    await page.getByLabel('Routine to run').selectOption('daysum')
    await page.getByRole('button', { name: 'Run the sweep' }).click()
    await sweepEnds(page)
    expect(await outcomes(page)).toEqual({ holds: 64, refused: 2 })
    expect(errors).toEqual([])
    await close()
  })

  test('comes back over a draft of the author, who can take it back in turn', async () => {
    const { page, close } = await openDemo()
    await pasteDraft(page, TOTAL)
    await page.getByRole('button', { name: 'Demo' }).click()
    await page.getByRole('button', { name: 'Open the demo' }).click()
    await expect.poll(() => codeOf(page), SOON).toContain('routine bylevel')
    await page.getByRole('button', { name: 'Bring back' }).click()
    await expect.poll(() => codeOf(page), SOON).toContain('routine total')
    await close()
  })
})

describe('a draft of the author', () => {
  test('is pasted, swept and counted as the command counts it', async () => {
    const { page, errors, close } = await openDemo()
    await pasteDraft(page, TOTAL)
    await setAndSweep(page, 'sizes', 'Values of n', '1000')
    await sweepEnds(page)
    expect(await outcomes(page)).toEqual({ holds: 6 })
    await page.locator('[role=gridcell]').nth(1).click()

    const folder = await mkdtemp(join(tmpdir(), 'tallyword-count-'))
    const file = join(folder, 'total.tally')
    await writeFile(file, TOTAL)
    const { stdout } = await promisify(execFile)(
      'npm',
      ['run', '-s', 'tallyword', '--', 'count', file, '--n', '1000', '--w', '32', '--json'],
      { cwd: ROOT },
    )
    await rm(folder, { recursive: true })
    const counted: { time: number; byLine: { line: number; time: number }[] } = JSON.parse(stdout)
    expect(await countAt(page, 2)).toBe(counted.time)
    for (const { line, time } of counted.byLine) expect(await countAt(page, line)).toBe(time)
    expect(errors).toEqual([])
    await close()
  })

  test('is told what is wrong under its line, and mended at a click', async () => {
    const { page, errors, close } = await openDemo()
    await pasteDraft(page, TOTAL.replace('hi <- hi + 1', 'hi <- hi ^ 1'))
    const message = page.locator('.message').first()
    await message.waitFor()
    await expect.poll(() => said(message), SOON).toMatch(/^Line 17\./)
    await page.getByRole('button', { name: 'Go to line 17' }).waitFor()
    await message.locator('button').first().click()
    await page.locator('.message').waitFor({ state: 'detached' })
    await expect.poll(() => codeOf(page), SOON).toContain('hi <- hi xor 1')
    expect(errors).toEqual([])
    await close()
  })

  test('turns older results grey, until it is as it was again', async () => {
    const { page, close } = await openDemo()
    await page.getByLabel('Draft in tally notation').click()
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.insertText('# more')
    await page.locator('.draft.is-stale').waitFor()
    await page.getByRole('button', { name: 'Run the sweep' }).waitFor()
    await page.keyboard.press('ControlOrMeta+z')
    await page.locator('.draft:not(.is-stale)').waitFor()
    await close()
  })

  test('moves its counts along with its lines', async () => {
    const { page, close } = await openDemo()
    await page.getByLabel('Draft in tally notation').click()
    await page.keyboard.press('ControlOrMeta+Home')
    const height = async (part: Locator) => (await part.boundingBox())!.y
    const beside = async () =>
      Math.round(
        (await height(page.locator('.margin .cell-total'))) -
          (await height(page.locator('.cm-line', { hasText: 'routine bylevel' }))),
      )
    const place = async () => height(page.locator('.cm-line', { hasText: 'routine bylevel' }))
    expect(await beside()).toBe(0)
    const before = await place()
    await page.keyboard.press('Enter')
    await page.keyboard.press('Enter')
    expect(await beside()).toBe(0)
    expect(Math.round((await place()) - before)).toBe(34)
    await close()
  })

  test('opens from a file and is saved as one', async () => {
    const { page, close } = await openDemo()
    await page.setInputFiles('input[type=file]', {
      name: 'gauges.tally',
      mimeType: 'text/plain',
      buffer: Buffer.from(TOTAL),
    })
    await page.getByText('gauges.tally is open.').waitFor()
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Save' }).click(),
    ])
    expect(download.suggestedFilename()).toBe('gauges.tally')
    expect(await readFile(await download.path(), 'utf8')).toBe(TOTAL)
    await close()
  })

  test('opens from a file that is dropped on the page', async () => {
    const { page, errors, close } = await openDemo()
    const drop = (name: string, bytes: number[]) =>
      page.evaluate(
        ([file, content]) => {
          const data = new DataTransfer()
          data.items.add(new File([new Uint8Array(content as number[])], file as string))
          for (const type of ['dragenter', 'dragover', 'drop'])
            document
              .querySelector('.cm-content')
              ?.dispatchEvent(new DragEvent(type, { dataTransfer: data, bubbles: true, cancelable: true }))
        },
        [name, bytes] as const,
      )
    await drop('gauges.txt', [...Buffer.from(TOTAL)])
    await page.getByText('gauges.txt is open.').waitFor()
    expect(await page.getByLabel('File name of the draft').inputValue()).toBe('gauges.tally')
    await expect.poll(() => codeOf(page), SOON).toContain('routine total')
    await drop('gauges.png', [0x89, 0x50, 0x4e, 0x47, 0, 0])
    await page.getByText(/gauges\.png was not opened: it is no text/).waitFor()
    await expect.poll(() => codeOf(page), SOON).toContain('routine total')
    expect(errors).toEqual([])
    await close()
  })

  test('is laid out by Format, as a change that can be undone', async () => {
    const { page, close } = await openDemo()
    await pasteDraft(page, TOTAL.replace('  lo <- 0', 'lo<-0'))
    await page.getByRole('button', { name: 'Format' }).click()
    const text = page.locator('.cm-content')
    await expect.poll(() => codeOf(page), SOON).toContain('  lo <- 0')
    await text.click()
    await page.keyboard.press('ControlOrMeta+z')
    await expect.poll(() => codeOf(page), SOON).toContain('\nlo<-0')
    await close()
  })
})

describe('the setting', () => {
  test('takes other widths, and keeps them unrun on request', async () => {
    const { page, close } = await openDemo()
    await page.locator('#slot-widths').click()
    await page.getByRole('button', { name: 'Remove width 64' }).click()
    await page.getByLabel('Width 2', { exact: true }).fill('2*lg(n)')
    await page.getByRole('button', { name: 'Keep, sweep later' }).click()
    await expect.poll(() => said(page.locator('.sentence')), SOON).toMatch(/w = 16, 2\*lg\(n\)/)
    await page.getByRole('button', { name: 'Run the sweep' }).waitFor()
    await expect(page.locator('#slot-widths').evaluate(slot => slot === document.activeElement)).resolves.toBe(true)
    await close()
  })

  test('runs without multiplication alone', async () => {
    const { page, close } = await openDemo()
    await page.locator('#slot-sets').click()
    await page.getByLabel(/^with multiplication/).uncheck()
    await page.getByRole('button', { name: 'Sweep', exact: true }).click()
    await sweepEnds(page)
    const found = await outcomes(page)
    expect(Object.values(found).reduce((sum, count) => sum + count)).toBe(33)
    await expect.poll(() => said(page.locator('.sentence')), SOON).toMatch(/64, without multiplication,/)
    await close()
  })

  test('says what is wrong beside the field, and leaves it as it was with Esc', async () => {
    const { page, close } = await openDemo()
    const before = await said(page.locator('.sentence'))
    await page.locator('#slot-sizes').click()
    const field = page.getByLabel('Values of n')
    await field.fill('2^6..')
    await expect(field.getAttribute('aria-invalid')).resolves.toBe('true')
    await page.locator('.problem:not(:empty)').waitFor()
    await page.keyboard.press('Enter')
    await expect(page.locator('.editor').count()).resolves.toBe(1)
    await page.keyboard.press('Escape')
    await expect(page.locator('.editor').count()).resolves.toBe(0)
    await expect.poll(() => said(page.locator('.sentence')), SOON).toBe(before)
    await close()
  })

  test('weighs a finished sweep again where its charges change', async () => {
    const { page, close } = await openDemo()
    const before = await countAt(page, 4)
    const tallies = await said(page.locator('.status .big'))
    await page.locator('#slot-charges').click()
    await page.getByLabel(/^operators/).check()
    await page.getByRole('button', { name: 'Weigh with these' }).click()
    await expect.poll(() => countAt(page, 4), SOON).toBeLessThan(before)
    // Moves, compares and jumps apart the claim holds at every point; nothing was run again.
    await expect.poll(() => said(page.locator('.status .big')), SOON).toBe(tallies)
    expect((await outcomes(page)).broken).toBeUndefined()
    await close()
  })
})

describe('a long sweep', () => {
  const LONG = `routine long
  in a[n]
  out x
begin
  x <- 0
  for i from 0 to n - 1
    for j from 0 to n - 1
      x <- x + 1
    end
  end
end
`

  test('leaves the page to its user, and is cancelled at once with its points kept', async () => {
    const { page, errors, close } = await openDemo()
    await pasteDraft(page, LONG)
    await setAndSweep(page, 'sizes', 'Values of n', '16, 60000')
    await expect.poll(async () => (await outcomes(page)).holds, SOON).toBeGreaterThanOrEqual(1)
    const started = Date.now()
    await page.getByRole('button', { name: /^Cancel, keep/ }).click()
    await page.locator('.status .big', { hasText: 'Cancelled: ' }).waitFor()
    expect(Date.now() - started).toBeLessThan(3000)
    expect((await outcomes(page)).holds).toBeGreaterThanOrEqual(1)
    // The worker was replaced where it did not answer: the next sweep runs.
    await setAndSweep(page, 'sizes', 'Values of n', '16')
    await sweepEnds(page)
    expect(await outcomes(page)).toEqual({ holds: 6 })
    expect(errors).toEqual([])
    await close()
  })
})

describe('a reload', () => {
  test('brings back draft, setting and theme', async () => {
    const { page, close } = await openDemo()
    await pasteDraft(page, TOTAL)
    await setAndSweep(page, 'sizes', 'Values of n', '8, 16')
    await page.getByLabel('Light or dark').selectOption('dark')
    await sweepEnds(page)
    await page.reload()
    await expect.poll(() => codeOf(page), SOON).toContain('routine total')
    await expect.poll(() => said(page.locator('.sentence')), SOON).toMatch(/n = 8, 16/)
    await expect(page.evaluate(() => document.documentElement.dataset.theme)).resolves.toBe('dark')
    expect(await draftText(page)).toBe(TOTAL)
    await close()
  })

  test('opens the demo beside what cannot be read, and gives that back', async () => {
    const { page, errors, close } = await openWorkbench()
    const damaged = '{"version":1,"draft":{"file":"lost.tally","text":"routine lo'
    await page.evaluate(text => {
      localStorage.clear()
      localStorage.setItem('tallyword.kept', text)
      // The page writes on its way out where it has something to write.
    }, damaged)
    await page.reload()
    await sweepEnds(page)
    await page.getByText(/What an earlier visit left here is damaged/).waitFor()
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Download what was left' }).click(),
    ])
    expect(await readFile(await download.path(), 'utf8')).toBe(damaged)
    await page.getByRole('button', { name: 'Discard it' }).click()
    await page.reload()
    await sweepEnds(page)
    await expect(page.getByText(/damaged/).count()).resolves.toBe(0)
    expect(errors).toEqual([])
    await close()
  })
})
