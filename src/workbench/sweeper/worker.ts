import { readProgram } from '../../routine'
import { runSweep } from '../../sweep'
import type { FromWorker, SweepRequest, ToWorker } from './messages'

const stops = new Map<number, AbortController>()

function post(message: FromWorker): void {
  self.postMessage(message)
}

self.addEventListener('message', ({ data }: MessageEvent<ToWorker>) => {
  if (data.kind === 'cancel') stops.get(data.number)?.abort()
  else void sweep(data.request)
})

async function sweep({ number, text, routine, setting }: SweepRequest): Promise<void> {
  const stop = new AbortController()
  stops.set(number, stop)
  try {
    const { program, diagnostics } = readProgram(text, routine)
    if (!program) throw new Error(`The draft was to be run with errors in it: ${diagnostics[0]?.message}`)
    const { complete } = await runSweep(program, setting, {
      signal: stop.signal,
      // At once, each by itself: the next point may keep this thread for long.
      onPoint: result => post({ kind: 'result', number, result }),
    })
    post({ kind: 'ended', number, complete })
  } catch (error) {
    post({ kind: 'crashed', number, message: error instanceof Error ? error.message : String(error) })
  } finally {
    stops.delete(number)
  }
}
