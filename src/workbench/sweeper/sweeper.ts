import type { PointResult } from '../../sweep/result'
import type { FromWorker, SweepRequest, ToWorker } from './messages'

export type SweepEnd = 'done' | 'cancelled' | 'crashed'

/** Takes what comes of one sweep. */
export interface SweepListener {
  /** Results since the last call, in the grid's order; now and then, so that a page has time to draw. */
  results(results: readonly PointResult[]): void
  /** Called once, last. `crash` is set where `end` is `crashed`. */
  ended(end: SweepEnd, crash?: string): void
}

/** Runs sweeps away from the page's thread, one at a time. */
export interface Sweeper {
  /** Starts a sweep; one that still runs is cancelled first. */
  start(request: SweepRequest, listener: SweepListener): void
  /** Stops the sweep that runs, if any; what has come of it stands. */
  cancel(): void
}

/** What a sweeper needs of a Web Worker. */
export interface WorkerLike {
  postMessage(message: ToWorker): void
  terminate(): void
  addEventListener(type: 'message', take: (event: { data: FromWorker }) => void): void
  addEventListener(type: 'error' | 'messageerror', take: (event: { message?: string }) => void): void
}

/** Milliseconds that a worker has to answer a cancel before it is replaced. */
export const PATIENCE = 200

/** Milliseconds between calls of `results`, at least: often enough to look alive. */
export const PACE = 100
/** The same as a multiple of what the last call gave the page to do, so that drawing never takes all of its time. */
const LEISURE = 3
/** The same at most. */
const SLOWEST = 1000

interface Running {
  readonly request: SweepRequest
  readonly listener: SweepListener
  /** Set once it is to stop: ends its patience. */
  deadline?: ReturnType<typeof setTimeout>
  /** Results that have not been passed on, and when they will be. */
  waiting: PointResult[]
  due?: ReturnType<typeof setTimeout> | undefined
}

type Asked = Pick<Running, 'request' | 'listener'>

/**
 * A sweeper over workers that `spawn` makes. A worker that crashes, or that does not answer a cancel in time, is terminated and the
 * next sweep has a new one.
 */
export function createSweeper(spawn: () => WorkerLike): Sweeper {
  let worker: WorkerLike | undefined
  let running: Running | undefined
  /** Asked for while an earlier sweep was still stopping. */
  let next: Asked | undefined
  let pace = PACE

  // Made ahead of the first sweep, which then need not wait for its start.
  worker = hire()

  function hire(): WorkerLike {
    const hired = spawn()
    hired.addEventListener('message', ({ data }) => {
      if (hired === worker) take(data)
    })
    for (const type of ['error', 'messageerror'] as const)
      hired.addEventListener(type, event => {
        if (hired !== worker) return
        dismiss()
        end('crashed', event.message || 'The worker stopped.')
      })
    return hired
  }

  function dismiss(): void {
    worker?.terminate()
    worker = undefined
  }

  function take(message: FromWorker): void {
    if (message.number !== running?.request.number) return
    switch (message.kind) {
      case 'result':
        running.waiting.push(message.result)
        running.due ??= setTimeout(passOn, pace, running)
        break
      case 'ended':
        end(message.complete ? 'done' : 'cancelled')
        break
      case 'crashed':
        end('crashed', message.message)
    }
  }

  function passOn(of: Running): void {
    clearTimeout(of.due)
    of.due = undefined
    const results = of.waiting
    of.waiting = []
    if (results.length === 0) return
    const begun = performance.now()
    of.listener.results(results)
    // The next turn comes once the page has drawn them.
    setTimeout(() => {
      pace = Math.min(SLOWEST, Math.max(PACE, LEISURE * (performance.now() - begun)))
    })
  }

  function end(how: SweepEnd, crash?: string): void {
    const ended = running
    running = undefined
    if (ended) {
      clearTimeout(ended.deadline)
      passOn(ended)
      ended.listener.ended(how, crash)
    }
    const following = next
    next = undefined
    if (following) begin(following)
  }

  function begin({ request, listener }: Asked): void {
    worker ??= hire()
    running = { request, listener, waiting: [] }
    pace = PACE
    worker.postMessage({ kind: 'sweep', request })
  }

  function cancel(): void {
    if (!running || running.deadline !== undefined) return
    worker?.postMessage({ kind: 'cancel', number: running.request.number })
    running.deadline = setTimeout(() => {
      dismiss()
      end('cancelled')
    }, PATIENCE)
  }

  return {
    start(request, listener) {
      if (!running) return begin({ request, listener })
      // One that waits already was never begun: the newer one takes its place.
      next?.listener.ended('cancelled')
      next = { request, listener }
      cancel()
    },
    cancel() {
      const waiting = next
      next = undefined
      waiting?.listener.ended('cancelled')
      cancel()
    },
  }
}
