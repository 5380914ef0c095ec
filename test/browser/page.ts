import type { Locator, Page } from 'playwright-core'
import { type OpenedWorkbench, openWorkbench } from './browser'

/** The two-word sum of the notation's own reference. */
export const TOTAL = `# Two-word sum of n words.
routine total
  in    a[n]
  out   lo, hi
  claim time  <= 7*n + 5
  claim space <= 4
  check hi * 2^w + lo = sum(a)
begin
  lo <- 0
  hi <- 0
  i  <- 0
again:
  if i >= n goto done
  x  <- a[i]
  lo <- lo + x
  if lo >= x goto next
  hi <- hi + 1
next:
  i  <- i + 1
  goto again
done:
  halt
end
`

/** How long a page on a busy machine may take to show something. */
export const SOON = { timeout: 20_000 }

/** Waits until the sweep at hand has ended. */
export async function sweepEnds(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Run again' }).waitFor()
}

/** The page with the demo's sweep finished. */
export async function openDemo(...options: Parameters<typeof openWorkbench>): Promise<OpenedWorkbench> {
  const opened = await openWorkbench(...options)
  await sweepEnds(opened.page)
  return opened
}

/** Another text in place of the draft, as a paste over everything. */
export async function pasteDraft(page: Page, text: string): Promise<void> {
  await page.getByLabel('Draft in tally notation').click()
  await page.keyboard.press('ControlOrMeta+a')
  await page.evaluate(pasted => {
    const data = new DataTransfer()
    data.setData('text/plain', pasted)
    document.activeElement?.dispatchEvent(
      new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }),
    )
  }, text)
}

/** The draft as the editor has it, lines that are not in view included. */
export async function draftText(page: Page): Promise<string> {
  return page.evaluate(() => {
    const kept = localStorage.getItem('tallyword.kept')
    return kept === null ? '' : (JSON.parse(kept).draft.text as string)
  })
}

/** The count beside a line of the draft: the row for screen readers, which says the same as the margin. */
export async function countAt(page: Page, line: number): Promise<number> {
  const row = page.locator('table.sr tr', { has: page.locator(`th[scope=row]:text-is("${line}")`) })
  return Number(await said(row.locator('td').nth(1)))
}

/** Cells of the grid by what they show. */
export async function outcomes(page: Page): Promise<Record<string, number>> {
  return page.evaluate(() => {
    const found: Record<string, number> = {}
    for (const cell of document.querySelectorAll<HTMLElement>('[data-outcome]'))
      found[cell.dataset.outcome!] = (found[cell.dataset.outcome!] ?? 0) + 1
    return found
  })
}

/** Sets the field of an editor of the setting and sweeps. */
export async function setAndSweep(page: Page, slot: string, field: string, value: string): Promise<void> {
  await page.locator(`#slot-${slot}`).click()
  await page.getByLabel(field, { exact: true }).fill(value)
  await page.keyboard.press('Enter')
}

/** What a part of the page says, blanks drawn together. */
export async function said(part: Locator): Promise<string> {
  return ((await part.textContent()) ?? '').replaceAll(/\s+/g, ' ').trim()
}

/** The lines of the draft that are drawn. */
export async function codeOf(page: Page): Promise<string> {
  return (await page.locator('.cm-line').allTextContents()).join('\n')
}
