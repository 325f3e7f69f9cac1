/** What a mail says, before it becomes plain text and HTML. Both are made from this one form, so they cannot differ. */
export interface Letter {
  readonly heading: string;
  readonly greeting: string;
  readonly paragraphs: readonly string[];
  readonly table?: { readonly head: readonly string[]; readonly rows: readonly (readonly string[])[] };
  readonly action?: { readonly label: string; readonly url: string };
  readonly after?: readonly string[];
  readonly small: readonly string[];
}

export function escapeHtml(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;');
}

function textTable(head: readonly string[], rows: readonly (readonly string[])[]): string[] {
  const all = [head, ...rows];
  const widths = head.map((_cell, column) => Math.max(...all.map((row) => (row[column] ?? '').length)));
  const line = (row: readonly string[]): string =>
    widths.map((width, column) => (column === 0 ? (row[column] ?? '').padEnd(width) : (row[column] ?? '').padStart(width))).join('  ');
  return [line(head), widths.map((width) => '-'.repeat(width)).join('  '), ...rows.map(line)];
}

export function letterAsText(letter: Letter): string {
  const blocks: string[] = [letter.heading, letter.greeting, ...letter.paragraphs];
  if (letter.table) blocks.push(textTable(letter.table.head, letter.table.rows).join('\n'));
  if (letter.action) blocks.push(`${letter.action.label}:\n${letter.action.url}`);
  blocks.push(...(letter.after ?? []), ['--', ...letter.small].join('\n'));
  return `${blocks.join('\n\n')}\n`;
}

const INK = '#1d2a2c';
const PAPER = '#faf6ec';
const REED = '#175e61';

function htmlTable(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const cell = (tag: 'th' | 'td', text: string, column: number): string =>
    `<${tag} style="padding:6px 10px;border-bottom:1px solid #d8d0bd;text-align:${column === 0 ? 'left' : 'right'};font-variant-numeric:tabular-nums">${escapeHtml(text)}</${tag}>`;
  const line = (tag: 'th' | 'td', row: readonly string[]): string =>
    `<tr>${row.map((text, column) => cell(tag, text, column)).join('')}</tr>`;
  return `<table role="table" style="border-collapse:collapse;margin:16px 0;font-size:14px">${line('th', head)}${rows.map((row) => line('td', row)).join('')}</table>`;
}

export function letterAsHtml(letter: Letter): string {
  const paragraph = (text: string): string => `<p style="margin:0 0 14px;line-height:1.5">${escapeHtml(text)}</p>`;
  const action = letter.action
    ? `<p style="margin:20px 0"><a href="${escapeHtml(letter.action.url)}" style="background:${REED};color:#ffffff;padding:10px 18px;text-decoration:none;border-radius:3px">${escapeHtml(letter.action.label)}</a></p>`
    : '';
  const small = letter.small.map((text) => `<p style="margin:0 0 4px">${escapeHtml(text)}</p>`).join('');
  return [
    '<!doctype html><html lang="en"><head><meta charset="utf-8">',
    `<title>${escapeHtml(letter.heading)}</title></head>`,
    `<body style="margin:0;background:${PAPER};color:${INK};font-family:Georgia,'Times New Roman',serif">`,
    '<div style="max-width:640px;margin:0 auto;padding:28px 20px">',
    `<h1 style="font-size:20px;margin:0 0 18px">${escapeHtml(letter.heading)}</h1>`,
    paragraph(letter.greeting),
    ...letter.paragraphs.map(paragraph),
    letter.table ? htmlTable(letter.table.head, letter.table.rows) : '',
    action,
    ...(letter.after ?? []).map(paragraph),
    `<div style="margin-top:24px;padding-top:12px;border-top:1px solid #d8d0bd;font-size:12px;color:#5b6462">${small}</div>`,
    '</div></body></html>',
  ].join('');
}
