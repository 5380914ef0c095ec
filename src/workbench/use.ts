import { createContext, useContext } from 'react'
import { useStore } from 'zustand'
import { useShallow } from 'zustand/react/shallow'
import type { WorkbenchState } from './store/state'
import { resolveTheme, type Theme } from './store/theme'
import type { Workbench } from './store/workbench'

export const WorkbenchContext = createContext<Workbench | undefined>(undefined)

/** The workbench of the page, for what can be done to it. */
export function useWorkbench(): Workbench {
  const workbench = useContext(WorkbenchContext)
  if (!workbench) throw new Error('A part of the page stands outside its workbench.')
  return workbench
}

/** A part of the state; the component is drawn again when that part changes, members of an object compared one by one. */
export function useWorkbenchState<T>(select: (state: WorkbenchState) => T): T {
  return useStore(useWorkbench().store, useShallow(select))
}

/** What is drawn now. */
export function useTheme(): Theme {
  return useWorkbenchState(({ theme, systemIsDark }) => resolveTheme(theme, systemIsDark))
}
