import type { Draft } from './draft'
import type { Scales } from './record'
import { isSettingText, type SettingText } from './setting-text'
import { THEME_CHOICES, type ThemeChoice } from './theme'

/** What survives a reload, apart from the theme. */
export interface Kept {
  readonly draft: Draft
  readonly setting: SettingText
  readonly scales: Scales
}

/** The part of the browser's storage that is used; every call may throw. */
export type Drawer = Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>

export const KEPT_KEY = 'tallyword.kept'
/** Read by index.html before the first paint, so it stands by itself: the bare choice. */
export const THEME_KEY = 'tallyword.theme'
/** Texts that could not be read; a JSON list of strings, so that none replaces another. */
export const DAMAGED_KEY = 'tallyword.damaged'

const VERSION = 1

/**
 * What was found: nothing, what was kept, or a text that makes no sense; that one is set aside under `DAMAGED_KEY`
 * where there is room, and `reason` says what is wrong with it. `closed` where the browser keeps nothing at all.
 */
export type Found =
  | { readonly kind: 'nothing' }
  | { readonly kind: 'kept'; readonly kept: Kept }
  | { readonly kind: 'damaged'; readonly reason: string; readonly text: string }
  | { readonly kind: 'closed' }

export function findKept(drawer: Drawer): Found {
  let text: string | null
  try {
    text = drawer.getItem(KEPT_KEY)
  } catch {
    return { kind: 'closed' }
  }
  if (text === null) return { kind: 'nothing' }
  const read = readKept(text)
  if (typeof read !== 'string') return { kind: 'kept', kept: read }
  if (setAside(drawer, text)) discard(drawer, KEPT_KEY)
  return { kind: 'damaged', reason: read, text }
}

/** Keeps it; false where the browser refuses. */
export function keep(drawer: Drawer, kept: Kept): boolean {
  try {
    drawer.setItem(KEPT_KEY, JSON.stringify({ version: VERSION, ...kept }))
    return true
  } catch {
    return false
  }
}

/** Reads what `keep` wrote, or says what is wrong with it. */
export function readKept(text: string): Kept | string {
  let value: unknown
  try {
    value = JSON.parse(text)
  } catch {
    return 'it is no JSON'
  }
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return 'it is no object'
  const { version, draft, setting, scales } = value as Record<string, unknown>
  if (version !== VERSION)
    return typeof version === 'number' && version > VERSION
      ? `it was kept by a newer version (${version}) of this page`
      : 'it does not say by which version it was kept'
  if (!isDraft(draft)) return 'its draft is incomplete'
  if (!isSettingText(setting)) return 'its setting is incomplete'
  if (!isScales(scales)) return 'its scales are incomplete'
  const { file, text: source, routine } = draft
  return { draft: { file, text: source, routine }, setting, scales }
}

function isDraft(value: unknown): value is Draft {
  if (typeof value !== 'object' || value === null) return false
  const { file, text, routine } = value as Record<string, unknown>
  return (
    typeof file === 'string' && typeof text === 'string' && (routine === undefined || typeof routine === 'string')
  )
}

function isScales(value: unknown): value is Scales {
  if (typeof value !== 'object' || value === null) return false
  const scales = value as Record<string, unknown>
  return ['n', 'w', 'operations', 'space'].every(axis => scales[axis] === 'log' || scales[axis] === 'linear')
}

export function findTheme(drawer: Drawer): ThemeChoice {
  try {
    const found = drawer.getItem(THEME_KEY)
    return THEME_CHOICES.find(choice => choice === found) ?? 'system'
  } catch {
    return 'system'
  }
}

export function keepTheme(drawer: Drawer, choice: ThemeChoice): void {
  try {
    drawer.setItem(THEME_KEY, choice)
  } catch {
    // The page says once, with the draft, that this browser keeps nothing.
  }
}

/** Texts set aside, oldest first. */
export function damagedTexts(drawer: Drawer): readonly string[] {
  let text: string | null
  try {
    text = drawer.getItem(DAMAGED_KEY)
  } catch {
    return []
  }
  if (text === null) return []
  try {
    const value: unknown = JSON.parse(text)
    if (Array.isArray(value) && value.every(each => typeof each === 'string')) return value
  } catch {
    // Damaged in its turn: one text more to give back.
  }
  return [text]
}

/** Whether there was room for it. */
function setAside(drawer: Drawer, text: string): boolean {
  const texts = damagedTexts(drawer)
  if (texts.includes(text)) return true
  try {
    drawer.setItem(DAMAGED_KEY, JSON.stringify([...texts, text]))
    return true
  } catch {
    return false
  }
}

/** Lets go of every damaged text, where it stood as well as where it was set aside. */
export function discardDamaged(drawer: Drawer): void {
  discard(drawer, DAMAGED_KEY)
  if (findKept(drawer).kind === 'damaged') discard(drawer, KEPT_KEY)
}

function discard(drawer: Drawer, key: string): void {
  try {
    drawer.removeItem(key)
  } catch {
    // It comes up again at the next visit.
  }
}
