import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import type { FromWorker, SweepRequest, ToWorker } from '../../src/workbench/sweeper/messages'
import {
  createSweeper,
  PACE,
  PATIENCE,
  type SweepListener,
  type WorkerLike,
} from '../../src/workbench/sweeper/sweeper'

class FakeWorker implements WorkerLike {
  readonly taken: ToWorker[] = []
  terminated = false
  private readonly listeners = new Map<string, (event: never) => void>()

  postMessage(message: ToWorker): void {
    this.taken.push(message)
  }

  terminate(): void {
    this.terminated = true
  }

  addEventListener(type: string, take: (event: never) => void): void {
    this.listeners.set(type, take)
  }

  say(message: FromWorker): void {
    this.listeners.get('message')?.({ data: message } as never)
  }

  fail(message: string): void {
    this.listeners.get('error')?.({ message } as never)
  }
}

function setUp() {
  const workers: FakeWorker[] = []
  const sweeper = createSweeper(() => {
    const worker = new FakeWorker()
    workers.push(worker)
    return worker
  })
  return { workers, sweeper }
}

function request(number: number): SweepRequest {
  return { number, text: '', routine: 'r', setting: {} as SweepRequest['setting'] }
}

const RESULT = { kind: 'result', number: 1, result: {} } as FromWorker

function listener() {
  return { results: vi.fn<SweepListener['results']>(), ended: vi.fn<SweepListener['ended']>() }
}

describe('the sweeper', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  test('has a worker ready before the first sweep, and keeps it', () => {
    const { workers, sweeper } = setUp()
    expect(workers).toHaveLength(1)
    const heard = listener()
    sweeper.start(request(1), heard)
    workers[0]?.say(RESULT)
    workers[0]?.say({ kind: 'ended', number: 1, complete: true })
    expect(heard.results).toHaveBeenCalledOnce()
    expect(heard.ended).toHaveBeenCalledExactlyOnceWith('done', undefined)
    sweeper.start(request(2), listener())
    expect(workers).toHaveLength(1)
  })

  test('asks first where it cancels, and waits no longer than its patience', () => {
    const { workers, sweeper } = setUp()
    const heard = listener()
    sweeper.start(request(1), heard)
    sweeper.cancel()
    expect(workers[0]?.taken.at(-1)).toEqual({ kind: 'cancel', number: 1 })
    vi.advanceTimersByTime(PATIENCE - 1)
    expect(heard.ended).not.toHaveBeenCalled()
    vi.advanceTimersByTime(1)
    expect(heard.ended).toHaveBeenCalledExactlyOnceWith('cancelled', undefined)
    expect(workers[0]?.terminated).toBe(true)
  })

  test('keeps a worker that answers the cancel', () => {
    const { workers, sweeper } = setUp()
    const heard = listener()
    sweeper.start(request(1), heard)
    sweeper.cancel()
    workers[0]?.say(RESULT)
    workers[0]?.say({ kind: 'ended', number: 1, complete: false })
    expect(heard.results).toHaveBeenCalledOnce()
    vi.advanceTimersByTime(10 * PATIENCE)
    expect(heard.ended).toHaveBeenCalledExactlyOnceWith('cancelled', undefined)
    expect(workers[0]?.terminated).toBe(false)
  })

  test('passes results on together, now and then, and the last before the end', () => {
    const { workers, sweeper } = setUp()
    const heard = listener()
    sweeper.start(request(1), heard)
    workers[0]?.say(RESULT)
    workers[0]?.say(RESULT)
    expect(heard.results).not.toHaveBeenCalled()
    vi.advanceTimersByTime(PACE)
    workers[0]?.say(RESULT)
    workers[0]?.say({ kind: 'ended', number: 1, complete: true })
    expect(heard.results.mock.calls.map(([results]) => results.length)).toEqual([2, 1])
    expect(heard.results.mock.invocationCallOrder[1]).toBeLessThan(heard.ended.mock.invocationCallOrder[0]!)
  })

  test('keeps the points that came before a worker that does not answer', () => {
    const { workers, sweeper } = setUp()
    const heard = listener()
    sweeper.start(request(1), heard)
    workers[0]?.say(RESULT)
    sweeper.cancel()
    vi.advanceTimersByTime(PATIENCE)
    expect(heard.results).toHaveBeenCalledOnce()
    expect(heard.ended).toHaveBeenCalledOnce()
  })

  test('runs the next sweep in a new worker where the old one had to go', () => {
    const { workers, sweeper } = setUp()
    sweeper.start(request(1), listener())
    sweeper.cancel()
    vi.advanceTimersByTime(PATIENCE)
    const heard = listener()
    sweeper.start(request(2), heard)
    expect(workers).toHaveLength(2)
    // A last word of the old worker's is not taken for the new one's.
    workers[0]?.say({ kind: 'ended', number: 2, complete: true })
    expect(heard.ended).not.toHaveBeenCalled()
    workers[1]?.say({ kind: 'ended', number: 2, complete: true })
    expect(heard.ended).toHaveBeenCalledOnce()
  })

  test('cancels a sweep for the next, and drops what comes late', () => {
    const { workers, sweeper } = setUp()
    const [first, second, third] = [listener(), listener(), listener()]
    sweeper.start(request(1), first)
    sweeper.start(request(2), second)
    sweeper.start(request(3), third)
    expect(second.ended).toHaveBeenCalledExactlyOnceWith('cancelled')
    workers[0]?.say({ kind: 'ended', number: 1, complete: false })
    expect(first.ended).toHaveBeenCalledExactlyOnceWith('cancelled', undefined)
    expect(workers[0]?.taken.at(-1)).toMatchObject({ kind: 'sweep', request: { number: 3 } })
    workers[0]?.say(RESULT)
    expect(first.results).not.toHaveBeenCalled()
    expect(third.results).not.toHaveBeenCalled()
  })

  test('tells a crash, and has another worker for the next sweep', () => {
    const { workers, sweeper } = setUp()
    const heard = listener()
    sweeper.start(request(1), heard)
    workers[0]?.fail('out of memory')
    expect(heard.ended).toHaveBeenCalledExactlyOnceWith('crashed', 'out of memory')
    sweeper.start(request(2), listener())
    expect(workers).toHaveLength(2)
  })
})
