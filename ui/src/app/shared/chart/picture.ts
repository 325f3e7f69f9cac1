/** Hands the reader a picture that was made here, from its data address. */
export function downloadPicture(name: string, address: string): void {
  const link = document.createElement('a');
  link.href = address;
  link.download = name;
  link.click();
}
