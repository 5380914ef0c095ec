import { describe, expect, test } from 'vitest'
import { DEMO_DRAFT, DEMO_SETTING } from '../../src/workbench/store/demo'
import {
  DAMAGED_KEY,
  type Drawer,
  damagedTexts,
  discardDamaged,
  findKept,
  findTheme,
  KEPT_KEY,
  type Kept,
  keep,
  keepTheme,
  THEME_KEY,
} from '../../src/workbench/store/keeping'
import { DEFAULT_SCALES } from '../../src/workbench/store/record'
import { memoryDrawer } from './memory-drawer'

const KEPT: Kept = { draft: { ...DEMO_DRAFT, routine: 'todatum' }, setting: DEMO_SETTING, scales: DEFAULT_SCALES }

describe('what is kept', () => {
  test('comes back', () => {
    const drawer = memoryDrawer()
    expect(keep(drawer, KEPT)).toBe(true)
    expect(findKept(drawer)).toEqual({ kind: 'kept', kept: KEPT })
  })

  test('is nothing on a first visit', () => {
    expect(findKept(memoryDrawer())).toEqual({ kind: 'nothing' })
  })

  test.each([
    ['cut short', JSON.stringify({ version: 1, ...KEPT }).slice(0, 200)],
    ['another kind of value', '[1, 2]'],
    ['no version', JSON.stringify(KEPT)],
    ['a newer version', JSON.stringify({ version: 2, ...KEPT })],
    ['no draft', JSON.stringify({ version: 1, ...KEPT, draft: { file: 'a.tally' } })],
    ['a strange setting', JSON.stringify({ version: 1, ...KEPT, setting: { widths: 3 } })],
    ['strange scales', JSON.stringify({ version: 1, ...KEPT, scales: { n: 'log' } })],
  ])('is set aside, word for word, where it is damaged: %s', (_, text) => {
    const drawer = memoryDrawer({ [KEPT_KEY]: text })
    const found = findKept(drawer)
    expect(found.kind).toBe('damaged')
    keep(drawer, KEPT)
    expect(damagedTexts(drawer)).toEqual([text])
  })

  test('loses no earlier damaged text to a later one', () => {
    const drawer = memoryDrawer({ [KEPT_KEY]: 'first' })
    findKept(drawer)
    drawer.setItem(KEPT_KEY, 'second')
    findKept(drawer)
    expect(damagedTexts(drawer)).toEqual(['first', 'second'])
    discardDamaged(drawer)
    expect(damagedTexts(drawer)).toEqual([])
    expect(findKept(drawer)).toEqual({ kind: 'nothing' })
  })

  test('takes a damaged list of damaged texts for one of them', () => {
    expect(damagedTexts(memoryDrawer({ [DAMAGED_KEY]: '["cut' }))).toEqual(['["cut'])
  })
})

describe('a browser that keeps nothing', () => {
  const refuse = () => {
    throw new Error('denied')
  }
  const closed: Drawer = { getItem: refuse, setItem: refuse, removeItem: refuse }

  test('is told apart from one with nothing kept', () => {
    expect(findKept(closed)).toEqual({ kind: 'closed' })
    expect(keep(closed, KEPT)).toBe(false)
    expect(findTheme(closed)).toBe('system')
    expect(() => keepTheme(closed, 'dark')).not.toThrow()
  })

  test('is survived where it is merely full', () => {
    const full: Drawer = { ...memoryDrawer({ [KEPT_KEY]: 'damaged' }), setItem: refuse }
    expect(findKept(full)).toEqual({ kind: 'damaged', reason: expect.any(String), text: 'damaged' })
  })
})

test('the theme is kept as the bare word that index.html reads', () => {
  const drawer = memoryDrawer()
  keepTheme(drawer, 'dark')
  expect(drawer.getItem(THEME_KEY)).toBe('dark')
  expect(findTheme(drawer)).toBe('dark')
  drawer.setItem(THEME_KEY, 'purple')
  expect(findTheme(drawer)).toBe('system')
})
