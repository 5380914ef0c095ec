import type { Workbench } from '../store/workbench'

/** Bytes past which a file is taken for no draft. */
const MOST_BYTES = 2_000_000

/** Opens a file as the draft, or says why not. */
export async function openPicked(workbench: Workbench, file: File): Promise<void> {
  const problem = await tryOpen(workbench, file)
  if (problem === undefined) workbench.dismiss('file')
  else
    workbench.notify({
      key: 'file',
      tone: 'trouble',
      text: `${file.name} was not opened: ${problem}`,
      actions: [],
    })
}

async function tryOpen(workbench: Workbench, file: File): Promise<string | undefined> {
  if (file.size > MOST_BYTES)
    return `it has ${file.size} bytes, and a draft has at most ${MOST_BYTES}. Open a file of text in tally notation.`
  let bytes: ArrayBuffer
  try {
    bytes = await file.arrayBuffer()
  } catch {
    return 'it could not be read. Check that it is still there and that it may be read.'
  }
  try {
    const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes)
    if (text.includes('\0')) return 'it is no text. Open a file of text in tally notation.'
    workbench.open(file.name, text.replaceAll(/\r\n?/g, '\n'))
  } catch {
    return 'it is no text in UTF-8. Save it as UTF-8 and open it again.'
  }
  return undefined
}
