import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { COLOUR_VALUES, MARKERS, WIDTH_COLOURS, widthLook } from '../../src/workbench/store/series'

const css = readFileSync(new URL('../../src/workbench/style/palette.css', import.meta.url), 'utf8')

/** The custom properties of one theme. */
function properties(theme: 'light' | 'dark'): Map<string, string> {
  const start = css.search(theme === 'light' ? /:root/ : /\[data-theme=.dark.\]/)
  const block = css.slice(start, css.indexOf('}', start))
  return new Map([...block.matchAll(/--(\w+): (#[0-9a-f]{6});/g)].map(([, name, value]) => [name!, value!]))
}

type Triple = readonly [number, number, number]

function linear(colour: string): Triple {
  const [red, green, blue] = [1, 3, 5].map(at => {
    const part = Number.parseInt(colour.slice(at, at + 2), 16) / 255
    return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4
  })
  return [red!, green!, blue!]
}

/** WCAG 2.2, relative luminance and contrast ratio. */
function contrast(a: string, b: string): number {
  const [light, dark] = [a, b]
    .map(colour => {
      const [red, green, blue] = linear(colour)
      return 0.2126 * red + 0.7152 * green + 0.0722 * blue
    })
    .sort((x, y) => y - x)
  return (light! + 0.05) / (dark! + 0.05)
}

// G. M. Machado, M. M. Oliveira, L. A. F. Fernandes, "A physiologically-based model for simulation of color vision
// deficiency", IEEE TVCG 15 (2009), severity 1.
const SIGHTS = {
  normal: [1, 0, 0, 0, 1, 0, 0, 0, 1],
  protan: [0.152286, 1.052583, -0.204868, 0.114503, 0.786281, 0.099216, -0.003882, -0.048116, 1.051998],
  deutan: [0.367322, 0.860646, -0.227968, 0.280085, 0.672501, 0.047413, -0.01182, 0.04294, 0.968881],
  tritan: [1.255528, -0.076749, -0.178779, -0.078411, 0.930809, 0.147602, 0.004733, 0.691367, 0.3039],
}

function seen(colour: string, sight: readonly number[]): Triple {
  const source = linear(colour)
  const [red, green, blue] = [0, 3, 6].map(row =>
    Math.min(
      1,
      Math.max(
        0,
        source.reduce((sum, part, at) => sum + part * sight[row + at]!, 0),
      ),
    ),
  )
  return [red!, green!, blue!]
}

/** CIELAB of linear sRGB, white D65. */
function lab([red, green, blue]: Triple): Triple {
  const curve = (t: number) => (t > 216 / 24389 ? Math.cbrt(t) : (841 / 108) * t + 4 / 29)
  const x = curve((0.4124 * red + 0.3576 * green + 0.1805 * blue) / 0.95047)
  const y = curve(0.2126 * red + 0.7152 * green + 0.0722 * blue)
  const z = curve((0.0193 * red + 0.1192 * green + 0.9505 * blue) / 1.08883)
  return [116 * y - 16, 500 * (x - y), 200 * (y - z)]
}

describe.each(['light', 'dark'] as const)('the %s palette', theme => {
  const palette = properties(theme)
  const paper = palette.get('paper')!

  test('is the same in the style sheet and in exports', () => {
    for (const colour of WIDTH_COLOURS) expect(palette.get(colour)).toBe(COLOUR_VALUES[theme][colour])
  })

  test.each([...WIDTH_COLOURS, 'ink', 'ink2', 'ink3', 'broken'])('has %s at 4.5:1 on paper at least', name => {
    expect(contrast(palette.get(name)!, paper)).toBeGreaterThanOrEqual(4.5)
  })

  test.each(Object.entries(SIGHTS))('keeps its hues apart under %s sight', (_, sight) => {
    const colours = [...WIDTH_COLOURS, 'broken', 'ink'].map(name => lab(seen(palette.get(name)!, sight)))
    for (const [place, a] of colours.entries())
      for (const b of colours.slice(place + 1))
        expect(Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2])).toBeGreaterThanOrEqual(18)
  })
})

test('no two of the first twenty-four widths look alike', () => {
  const looks = Array.from({ length: 24 }, (_, place) => JSON.stringify(widthLook(place)))
  expect(new Set(looks).size).toBe(24)
  expect(MARKERS.length).toBeGreaterThan(3)
})
