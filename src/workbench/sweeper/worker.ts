import { readProgram } from '../../routine'
import { type PointResult, runSweep } from '../../sweep'
import type { FromWorker, SweepRequest, ToWorker } from './messages'

/** Milliseconds between batches: often enough to look alive, seldom enough to leave the page its time. */
const BATCH = 50

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
  let batch: PointResult[] = []
  let last = performance.now()
  const send = () => {
    if (batch.length > 0) post({ kind: 'results', number, results: batch })
    batch = []
    last = performance.now()
  }
  try {
    const { program, diagnostics } = readProgram(text, routine)
    if (!program) throw new Error(`The draft was to be run with errors in it: ${diagnostics[0]?.message}`)
    const { complete } = await runSweep(program, setting, {
      signal: stop.signal,
      onPoint(result) {
        batch.push(result)
        if (performance.now() - last > BATCH) send()
      },
    })
    send()
    post({ kind: 'ended', number, complete })
  } catch (error) {
    send()
    post({ kind: 'crashed', number, message: error instanceof Error ? error.message : String(error) })
  } finally {
    stops.delete(number)
  }
}
