/** Gives the user a text as a file. */
export function downloadText(file: string, text: string, type = 'text/plain'): void {
  downloadBlob(file, new Blob([text], { type: `${type};charset=utf-8` }))
}

/** Gives the user anything as a file. */
export function downloadBlob(file: string, blob: Blob): void {
  const address = URL.createObjectURL(blob)
  const link = document.createElement('a')
  link.href = address
  link.download = file
  link.click()
  // The download has taken its own hold of the blob by the next turn in every browser; some take a moment longer.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}
