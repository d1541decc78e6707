/** Hand a file to the browser's downloads. */
export function saveFile(name: string, content: Blob): void {
  const address = URL.createObjectURL(content)
  const link = document.createElement('a')
  link.href = address
  link.download = name
  link.click()
  // The browser reads the address after the click has been dealt with.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}
