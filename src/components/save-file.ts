/** Hands a file made in the page to the browser's downloads. */
export function saveFile(name: string, content: Blob | string, type = 'text/plain;charset=utf-8'): void {
  const address = URL.createObjectURL(typeof content === 'string' ? new Blob([content], { type }) : content);
  const anchor = document.createElement('a');
  anchor.href = address;
  anchor.download = name;
  anchor.click();
  // The browser reads the bytes after the click has returned.
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
}
