import { expect, test } from 'vitest'
import { openWorkbench } from './browser'
import { codeOf, openDemo, outcomes, SOON, said, sweepEnds } from './page'

test('everything is reached and done from the keyboard', async () => {
  const { page, errors, close } = await openDemo()
  await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur())

  // Tab by tab from the top of the page to its end; each stop is where the eye expects it, and visible.
  const stops: string[] = []
  for (let step = 0; step < 120; step++) {
    await page.keyboard.press('Tab')
    const stop = await page.evaluate(() => {
      const at = document.activeElement
      if (!at || at === document.body) return undefined
      const { outlineStyle } = getComputedStyle(at)
      const ring = outlineStyle !== 'none' || at.classList.contains('cm-content')
      return { name: at.id || at.getAttribute('aria-label') || at.textContent || at.tagName, ring }
    })
    if (!stop) break
    expect(stop).toMatchObject({ ring: true })
    stops.push(stop.name)
    // Out of the editor, which keeps Tab for itself.
    if (stop.name === 'Draft in tally notation') await page.keyboard.press('Escape')
  }
  expect(stops[0]).toBe('Go to the draft')
  for (const slot of ['slot-widths', 'slot-sets', 'slot-charges', 'slot-sizes', 'slot-feed', 'slot-trials'])
    expect(stops).toContain(slot)
  const order = ['slot-widths', 'Run again', 'slot-reading', 'Draft in tally notation'].map(name =>
    stops.indexOf(name),
  )
  expect(order).toEqual([...order].sort((a, b) => a - b))
  expect(order[0]).toBeGreaterThan(0)

  // A slot opens with Enter, takes what is typed, and sweeps with Enter.
  await page.locator('#slot-sizes').focus()
  await page.keyboard.press('Enter')
  await page.keyboard.type('32, 64')
  await page.keyboard.press('Enter')
  await sweepEnds(page)
  expect(Object.values(await outcomes(page)).reduce((sum, count) => sum + count)).toBe(12)

  // Arrow keys move the reading through the grid.
  const cell = page.locator('[role=gridcell][tabindex="0"]')
  await cell.focus()
  await page.keyboard.press('Home')
  await page.keyboard.press('PageUp')
  await expect.poll(() => said(page.locator('#slot-reading')), SOON).toMatch(/n = 2\^5, w = 16, with /)
  await page.keyboard.press('ArrowDown')
  await page.keyboard.press('ArrowRight')
  await expect.poll(() => said(page.locator('#slot-reading')), SOON).toMatch(/n = 2\^6, w = 32, with /)

  // The draft: Tab indents, Escape and Tab leaves; Control and Enter sweeps.
  await page.locator('.cm-content').focus()
  await page.keyboard.press('ControlOrMeta+Home')
  await page.keyboard.press('Tab')
  await expect.poll(() => codeOf(page), SOON).toMatch(/^ {2}#/)
  await page.keyboard.press('ControlOrMeta+Enter')
  await page.locator('.draft:not(.is-stale)').waitFor()
  await sweepEnds(page)
  await page.locator('.cm-content').focus()
  await page.keyboard.press('Escape')
  await page.keyboard.press('Tab')
  await expect(page.evaluate(() => document.activeElement?.closest('.cm-editor') === null)).resolves.toBe(true)
  expect(errors).toEqual([])
  await close()
})

test('a remedy is carried out from the keyboard', async () => {
  const { page, close } = await openDemo()
  await page.locator('.cm-content').focus()
  await page.keyboard.press('ControlOrMeta+a')
  await page.keyboard.type('routine one\nout x\nbegin\nx <- 1 ^ 1\nend\n')
  // What half a draft lacks may be told while it is typed; the remedy is for the whole.
  await page.locator('.message', { hasText: 'is power' }).waitFor()
  await expect.poll(() => page.locator('.message').count(), SOON).toBe(1)
  await page.keyboard.press('ControlOrMeta+Home')
  await page.keyboard.press('F8')
  await page.keyboard.press('Alt+Enter')
  await page.locator('.message').waitFor({ state: 'detached' })
  await expect.poll(() => codeOf(page), SOON).toContain('xor')
  await close()
})

test.each([
  [390, 844],
  [320, 640],
  [760, 900],
  [1280, 800],
  [1600, 1000],
])('at %i by %i nothing is wider than the page', async (width, height) => {
  const { page, errors, close } = await openWorkbench({ width, height })
  await sweepEnds(page)
  const wider = () =>
    page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
  expect(await wider()).toBe(0)
  for (const slot of ['widths', 'charges', 'sizes', 'feed']) {
    await page.locator(`#slot-${slot}`).click()
    expect(await wider()).toBe(0)
    await page.keyboard.press('Escape')
  }
  expect(errors).toEqual([])
  await close()
})
