/**
 * Makes fonts/icons.woff2 from the icons named in fonts/icons.txt, one a line: `node fonts/subset-icons.mjs`.
 * The whole icon font weighs megabytes; what the screens use, a few kilobytes. The output is committed.
 * harfbuzzjs and fontverter come with subset-font.
 */
import { readFile, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';
import { convert } from 'fontverter';
import { Blob, Buffer as TextRun, Face, Font, shape } from 'harfbuzzjs';
import subsetFont from 'subset-font';

const here = (name) => fileURLToPath(new URL(name, import.meta.url));
const source = createRequire(import.meta.url).resolve('material-symbols/material-symbols-rounded.woff2');
const names = (await readFile(here('icons.txt'), 'utf8')).split('\n').filter(Boolean);
const whole = await readFile(source);

const face = new Face(new Blob(await convert(whole, 'truetype')));
const font = new Font(face);
const glyphOf = (text) => {
  const run = new TextRun();
  run.addText(text);
  run.guessSegmentProperties();
  shape(font, run);
  const glyphs = run.getGlyphInfos();
  return glyphs.length === 1 ? glyphs[0].codepoint : undefined;
};
const characterOf = new Map();
for (const unicode of face.collectUnicodes()) {
  const glyph = font.nominalGlyph(unicode);
  if (glyph !== undefined && !characterOf.has(glyph)) characterOf.set(glyph, String.fromCodePoint(unicode));
}

const characters = names.map((name) => {
  const character = characterOf.get(glyphOf(name));
  if (character === undefined) throw new Error(`There is no icon named ${name}.`);
  return character;
});

// Without layout closure only the ligatures of the icons kept survive; with it, letters would keep all of them.
const subset = await subsetFont(whole, `abcdefghijklmnopqrstuvwxyz0123456789_${characters.join('')}`, {
  targetFormat: 'woff2',
  noLayoutClosure: true,
  variationAxes: { FILL: 0, GRAD: 0, opsz: 20, wght: 400 },
});
await writeFile(here('icons.woff2'), subset);
process.stdout.write(`${names.length} icons, ${subset.length} bytes\n`);
