/** Hands a file to the browser to be kept. */
export function offerDownload(blob: Blob, name: string): void {
  const address = URL.createObjectURL(blob)
  const link = document.createElement('a')
  link.href = address
  link.download = name
  link.click()
  // the browser has taken hold of it by then; the address would keep the samples alive
  setTimeout(() => URL.revokeObjectURL(address), 60_000)
}
