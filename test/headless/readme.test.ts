import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, test } from 'vitest'
import { runCommand } from '../../src/headless/command'

const readme = readFileSync(join(import.meta.dirname, '..', '..', 'README.md'), 'utf8')
const folder = mkdtempSync(join(tmpdir(), 'tallyword-readme-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** The fenced blocks of a language, without their fences. */
function blocks(language: string): string[] {
  return [...readme.matchAll(new RegExp(`^\`\`\`${language}\\n(.*?)^\`\`\`$`, 'gms'))].map(match => match[1]!)
}

const [routine = ''] = blocks('tally')
writeFileSync(join(folder, 'total.tally'), routine)
writeFileSync(join(folder, 'tight.tally'), routine.replace('7*n + 5', '6*n + 5'))

const examples = blocks('console').map(block => {
  const [line, ...shown] = block.split('\n')
  return { line: line!, shown: shown.join('\n') }
})

test('the README shows the command three times', () => {
  expect(examples.length).toBe(3)
})

test.each(examples)('$line', async ({ line, shown }) => {
  const words = /^\$ npm run -s tallyword -- (.*)$/.exec(line)![1]!
  const lines: string[] = []
  await runCommand(
    words.split(' ').map(word => word.replaceAll("'", '')),
    {
      folder,
      print: text => lines.push(text),
      complain: text => lines.push(text),
      readInput: async () => '',
    },
  )
  expect(`${lines.join('\n')}\n`).toBe(shown)
})
