import type { Drawer } from '../../src/workbench/store/keeping'

/** A browser's storage that lasts as long as the test. */
export function memoryDrawer(entries: Readonly<Record<string, string>> = {}): Drawer {
  const kept = new Map(Object.entries(entries))
  return {
    getItem: key => kept.get(key) ?? null,
    setItem: (key, value) => void kept.set(key, value),
    removeItem: key => void kept.delete(key),
  }
}
