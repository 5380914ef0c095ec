import type { AxisScale } from '../store/record'

/** A place on an axis: its label is plain digits, or a base with an exponent. */
export interface Tick {
  readonly value: number
  readonly text: string
  readonly exponent?: number
  /** Drawn without a label, where labels would run into each other. */
  readonly bare: boolean
}

export interface AxisPlan {
  readonly scale: AxisScale
  readonly domain: readonly [number, number]
  readonly ticks: readonly Tick[]
}

/** Fewest pixels from one label to the next, along and across. */
const LABEL_GAP = { along: 34, across: 20 } as const
const GROUP = /\B(?=(\d{3})+$)/g

/** Digits with thousands apart by a thin space, from five digits on. */
export function plainLabel(value: number): string {
  const text = Number.isInteger(value) ? String(value) : String(Number(value.toPrecision(4)))
  return /^\d{5,}$/.test(text) ? text.replace(GROUP, '\u2009') : text
}

/**
 * An axis over the values to be drawn. Log scales hold where every value is above 0; else the axis is linear. Powers of
 * two are marked where every value given in `marks` is one (sizes that double), else powers of ten; with `digits` no label
 * has an exponent.
 */
export function planAxis(
  values: readonly number[],
  wanted: AxisScale,
  pixels: number,
  options: {
    readonly marks?: readonly number[]
    readonly fromZero?: boolean
    readonly along?: boolean
    readonly digits?: boolean
  } = {},
): AxisPlan {
  const finite = values.filter(Number.isFinite)
  const least = finite.length > 0 ? Math.min(...finite) : 0
  const most = finite.length > 0 ? Math.max(...finite) : 1
  const gap = options.along ? LABEL_GAP.along : LABEL_GAP.across
  const marks = options.marks ?? []
  const powers = marks.length > 1 && marks.every(value => value > 0 && Number.isInteger(Math.log2(value)))
  if (wanted === 'log' && least > 0) {
    const plan = powers
      ? planPowers(2, least, most, pixels, gap, false)
      : planPowers(10, least, most, pixels, gap, true)
    return options.digits ? { ...plan, ticks: plan.ticks.map(inDigits) } : plan
  }
  const low = options.fromZero ? Math.min(0, least) : least
  const high = most > low ? most : low + 1
  if (powers && wanted === 'linear') {
    const step = niceStep((high - low) / Math.max(2, pixels / gap))
    return { scale: 'linear', domain: [low, high], ticks: linearTicks(low, high, step) }
  }
  const step = niceStep((high - low) / Math.max(2, Math.min(7, pixels / gap)))
  const top = options.along ? high : Math.ceil(high / step) * step
  return { scale: 'linear', domain: [low, top], ticks: linearTicks(low, top, step) }
}

function planPowers(
  base: 2 | 10,
  least: number,
  most: number,
  pixels: number,
  gap: number,
  pad: boolean,
): AxisPlan {
  const log = base === 2 ? Math.log2 : Math.log10
  let low = least
  let high = most
  if (log(high) - log(low) < 0.35) {
    low = base ** Math.floor(log(low) - 1e-9)
    high = base ** Math.ceil(log(high) + 1e-9)
  } else if (pad) {
    low /= 1.3
    high *= 1.15
  }
  const first = Math.ceil(log(low) - 1e-9)
  const last = Math.floor(log(high) + 1e-9)
  const exponents = Array.from({ length: Math.max(0, last - first + 1) }, (_, at) => first + at)
  // Fewer than two powers in sight: the linear way has better marks.
  if (exponents.length < 2) {
    const step = niceStep((high - low) / Math.max(2, Math.min(5, pixels / gap)))
    return { scale: 'log', domain: [low, high], ticks: linearTicks(low, high, step) }
  }
  const spacing = (pixels / (log(high) - log(low) || 1)) * 1
  const every = Math.max(1, Math.ceil(gap / spacing))
  const ticks = exponents.map((exponent, at): Tick => {
    const bare = at % every !== 0
    if (base === 2 && exponent < 5) return { value: 2 ** exponent, text: String(2 ** exponent), bare }
    if (base === 10 && exponent >= 0 && exponent < 2)
      return { value: 10 ** exponent, text: String(10 ** exponent), bare }
    return { value: base ** exponent, text: String(base), exponent, bare }
  })
  return { scale: 'log', domain: [low, high], ticks }
}

function inDigits({ value, bare }: Tick): Tick {
  return { value, text: plainLabel(value), bare }
}

function linearTicks(low: number, high: number, step: number): Tick[] {
  const ticks: Tick[] = []
  for (let at = Math.ceil(low / step - 1e-9); at * step <= high + step * 1e-9; at++) {
    const value = Number((at * step).toPrecision(12))
    ticks.push({ value, text: plainLabel(value), bare: false })
  }
  return ticks
}

/** The least of 1, 2, 5 times a power of ten that is not below. */
function niceStep(rough: number): number {
  if (!(rough > 0)) return 1
  const power = 10 ** Math.floor(Math.log10(rough))
  return (([1, 2, 5, 10] as const).find(factor => factor * power >= rough * (1 - 1e-9)) ?? 10) * power
}
