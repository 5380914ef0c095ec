/** Something the page says under its head until it is dismissed. */
export interface Notice {
  readonly key: string
  /** `trouble` is read out at once. */
  readonly tone: 'plain' | 'trouble'
  readonly text: string
  /** What can be done about it; doing it dismisses the notice unless it `stays`. */
  readonly actions: readonly NoticeAction[]
}

export interface NoticeAction {
  readonly label: string
  readonly act: () => void
  readonly stays?: boolean
}
