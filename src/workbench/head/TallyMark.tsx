/** Four strokes and one across: five. */
export function TallyMark() {
  return (
    <svg viewBox="0 0 24 16" width="24" height="16" aria-hidden="true" className="tally-mark">
      <path d="M4 2.200c.2 4 0 8 .1 11.600M9 2c-.2 4 .1 8 0 12M14 2.300c.1 4-.1 8 .1 11.400M19 2c.1 4-.1 8 0 12M1 12.600C7 10 15 6.600 22.500 3.400" />
    </svg>
  )
}
