/** Hands a file to the browser's own downloads. */
export function saveFile(file: Blob, name: string): void {
  const url = URL.createObjectURL(file);
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  // The browser has taken the file by the next turn; then the memory is given back.
  setTimeout(() => URL.revokeObjectURL(url), 0);
}
