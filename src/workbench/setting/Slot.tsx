import type { ReactNode } from 'react'

export interface SlotProps {
  /** For tests and for returning the focus. */
  readonly id: string
  /** What it opens, for a screen reader: the words in the slot say only what is set. */
  readonly opens: string
  readonly isOpen: boolean
  readonly onOpen: () => void
  readonly children: ReactNode
}

/** A part of a sentence that opens an editor. It wraps like the text around it, which no button element does. */
export function Slot({ id, opens, isOpen, onOpen, children }: SlotProps) {
  return (
    // biome-ignore lint/a11y/useSemanticElements: a button element cannot be broken over lines
    <span
      id={id}
      className="slot"
      role="button"
      tabIndex={0}
      aria-haspopup="dialog"
      aria-expanded={isOpen}
      aria-description={opens}
      onClick={onOpen}
      onKeyDown={event => {
        if (event.key !== 'Enter' && event.key !== ' ') return
        event.preventDefault()
        onOpen()
      }}
    >
      {children}
    </span>
  )
}
