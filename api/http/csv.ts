import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { Readable } from 'node:stream';
import Papa from 'papaparse';
import { FileRefused } from '../domain/files/file-problems';
import { MOST_ROWS, type TableReader } from '../domain/files/table';

/** Fed to the parser without a row ending: then a quote is open, or this is no table. */
const LONGEST_ROW = 1_000_000;

/** What a file is called by its first bytes, where these show that it is no text. */
const KINDS: readonly (readonly [string, string])[] = [
  ['504b0304', 'a zip archive or a workbook; save the sheet as CSV'],
  ['504b0506', 'an empty zip archive'],
  ['d0cf11e0', 'an old workbook; save the sheet as CSV'],
  ['1f8b', 'compressed by gzip; send it unpacked'],
  ['25504446', 'a PDF'],
  ['89504e47', 'a picture'],
  ['fffe', 'text in UTF-16; save it in UTF-8'],
  ['feff', 'text in UTF-16; save it in UTF-8'],
];

/** Stops the reading of a file that cannot be read on. */
class Unreadable extends Error {}

function refuseOtherKinds(first: Buffer): void {
  const start = first.subarray(0, 4).toString('hex');
  const kind = KINDS.find(([mark]) => start.startsWith(mark));
  if (kind !== undefined) throw new Unreadable(`must be a CSV file; this is ${kind[1]}`);
  if (first.subarray(0, 8192).includes(0)) throw new Unreadable('must be a CSV file; this is not text');
}

/** The file's text in UTF-8, with every line break as one character, hashed on the way. */
async function* textOf(path: string, hash: (bytes: Buffer) => void, fed: (characters: number) => void): AsyncGenerator<string> {
  const decoder = new TextDecoder('utf-8', { fatal: true });
  const decode = (bytes?: Buffer): string => {
    try {
      return bytes === undefined ? decoder.decode() : decoder.decode(bytes, { stream: true });
    } catch {
      throw new Unreadable('must be text in UTF-8; it holds bytes that are none');
    }
  };
  let first = true;
  let held = '';
  for await (const bytes of createReadStream(path) as AsyncIterable<Buffer>) {
    if (first) refuseOtherKinds(bytes);
    first = false;
    hash(bytes);
    const text = held + decode(bytes);
    held = text.endsWith('\r') ? '\r' : '';
    const whole = text.slice(0, text.length - held.length).replaceAll(/\r\n?/g, '\n');
    fed(whole.length);
    yield whole;
  }
  if (first) throw new Unreadable('must not be empty');
  yield (held + decode()).replaceAll(/\r\n?/g, '\n');
}

function lineBreaksIn(fields: readonly string[]): number {
  return fields.reduce((sum, field) => sum + (field.includes('\n') ? field.split('\n').length - 1 : 0), 0);
}

/**
 * Reads a CSV file as a stream, row by row into a reader.
 * @returns what the reader gathered, and the SHA-256 of the file's bytes in hexadecimal
 * @throws FileRefused with every problem, at its line and column
 */
export async function readCsv<T>(path: string, fileName: string, reader: TableReader<T>): Promise<{ value: T; contentHash: string }> {
  const hash = createHash('sha256');
  let [line, rows, unparsed, headed] = [1, 0, 0, false];
  const take = (fields: string[], quoteFault: boolean): boolean => {
    unparsed = 0;
    const at = line;
    line += 1 + lineBreaksIn(fields);
    if (fields.length === 1 && fields[0]?.trim() === '') return true;
    if (quoteFault) reader.problems.add(at, null, fields.join(','), 'has a quotation mark that is not closed, or text after one');
    if (!headed) {
      headed = true;
      return reader.header(fields) && !quoteFault;
    }
    rows += 1;
    if (rows > MOST_ROWS) throw new Unreadable(`must have ${MOST_ROWS} rows at most`);
    if (!quoteFault) reader.row(at, fields);
    return true;
  };
  const fed = (characters: number): void => {
    unparsed += characters;
    if (unparsed > LONGEST_ROW) throw new Unreadable('has no line break for a million characters: a quotation mark is not closed, or this is no table');
  };
  const source = Readable.from(textOf(path, (bytes) => hash.update(bytes), fed), { objectMode: true });
  try {
    await parse(source, take);
    if (!headed) throw new Unreadable('must not be empty');
  } catch (error) {
    if (!(error instanceof Unreadable)) throw error;
    reader.problems.add(line, null, null, error.message);
  } finally {
    source.destroy();
  }
  const value = reader.end();
  if (reader.problems.count > 0) throw new FileRefused(reader.problems.report(fileName, rows));
  return { value, contentHash: hash.digest('hex') };
}

/** @param take answers whether to go on */
function parse(source: Readable, take: (fields: string[], quoteFault: boolean) => boolean): Promise<void> {
  return new Promise((resolve, reject) => {
    Papa.parse<string[], Readable>(source, {
      delimiter: ',',
      newline: '\n',
      step: (result, parser) => {
        try {
          if (!take(result.data, result.errors.some(({ type }) => type === 'Quotes'))) parser.abort();
        } catch (error) {
          reject(error instanceof Error ? error : new Error(String(error)));
          parser.abort();
        }
      },
      complete: () => resolve(),
      error: reject,
    });
  });
}
