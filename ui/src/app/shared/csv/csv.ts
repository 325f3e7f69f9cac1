export type Cell = string | number | null;

/** Text that a spreadsheet would run as a formula is kept from doing so. */
function safe(text: string): string {
  return /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
}

function csvCell(cell: Cell): string {
  if (typeof cell === 'number') return String(cell);
  const text = safe(cell ?? '');
  return /[",\n\r]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** Rows as CSV (RFC 4180): figures plain, with a point, so that they are read back as they are. */
export function csvOf(rows: readonly (readonly Cell[])[]): string {
  return rows.map((row) => row.map(csvCell).join(',') + '\r\n').join('');
}

/** Rows as a spreadsheet takes them from the clipboard. */
export function tabbedOf(rows: readonly (readonly Cell[])[]): string {
  return rows
    .map((row) =>
      row
        .map((cell) =>
          typeof cell === 'number' ? String(cell) : safe((cell ?? '').replace(/[\t\r\n]+/g, ' ')),
        )
        .join('\t'),
    )
    .join('\n');
}

/** Hands the reader a file that was made here. */
export function download(name: string, content: Blob): void {
  const address = URL.createObjectURL(content);
  const link = document.createElement('a');
  link.href = address;
  link.download = name;
  link.click();
  // The download reads the address after the click has returned.
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
}

/** The mark at the front tells spreadsheets that the file is UTF-8. */
export function downloadCsv(name: string, rows: readonly (readonly Cell[])[]): void {
  download(name, new Blob(['\ufeff', csvOf(rows)], { type: 'text/csv;charset=utf-8' }));
}
