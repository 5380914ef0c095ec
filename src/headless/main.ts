import { text } from 'node:stream/consumers'
import { runCommand } from './command'

// The command: `npm run -s tallyword -- VERB ...`.

// A reader that has seen enough (a pager, head) closes the pipe: that is no fault.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit()
  throw error
})

const watched = process.stderr.isTTY
const ERASE_LINE = '\r\x1b[K'

process.exitCode = await runCommand(process.argv.slice(2), {
  // npm runs scripts in the project's folder; paths are meant from where it was called.
  folder: process.env.npm_lifecycle_event === 'tallyword' ? (process.env.INIT_CWD ?? process.cwd()) : process.cwd(),
  print: line => process.stdout.write(`${line}\n`),
  complain: line => process.stderr.write(`${line}\n`),
  ...(watched ? { progress: line => process.stderr.write(ERASE_LINE + (line ?? '')) } : {}),
  readInput: () => text(process.stdin),
})
