import { useSyncExternalStore } from 'react'

/** How the page is laid out, by its width; the style sheet has the same limits. */
export type Layout = 'wide' | 'two' | 'one' | 'narrow'

const LIMITS: readonly (readonly [Layout, string])[] = [
  ['wide', '(min-width: 1500px)'],
  ['two', '(min-width: 1200px)'],
  ['one', '(min-width: 701px)'],
]

function current(): Layout {
  return LIMITS.find(([, query]) => matchMedia(query).matches)?.[0] ?? 'narrow'
}

function subscribe(changed: () => void): () => void {
  const queries = LIMITS.map(([, query]) => matchMedia(query))
  for (const query of queries) query.addEventListener('change', changed)
  return () => {
    for (const query of queries) query.removeEventListener('change', changed)
  }
}

export function useLayout(): Layout {
  return useSyncExternalStore(subscribe, current)
}
