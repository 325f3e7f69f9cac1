import { randomUUID } from 'node:crypto';
import { readdir, rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import type { Request, Response } from 'express';
import multer, { MulterError } from 'multer';
import { InvalidInput } from '../domain/shared/errors';
import { HttpProblem } from './problem';

/** A file received to disk under a random name. */
export interface UploadedFile {
  readonly path: string;
  readonly originalName: string;
  readonly bytes: number;
  remove(): Promise<void>;
}

export interface Uploads {
  /** Receives the part named `file`; the form's other fields become the body. */
  receive(req: Request, res: Response): Promise<UploadedFile>;
}

const WORDS: Partial<Record<MulterError['code'], string>> = {
  LIMIT_FILE_COUNT: 'send one file',
  LIMIT_UNEXPECTED_FILE: 'send one file, in the part named "file"',
  LIMIT_PART_COUNT: 'the form has too many parts',
  LIMIT_FIELD_VALUE: 'a field of the form is too long',
};

/**
 * Receives uploads into a folder.
 * @param folder where the files lie until their request is answered
 * @param largestBytes of one file
 */
export function diskUploads(folder: string, largestBytes: number): Uploads {
  const receiver = multer({
    storage: multer.diskStorage({ destination: folder, filename: (_req, _file, done) => done(null, randomUUID()) }),
    limits: { fileSize: largestBytes, files: 1, parts: 20, fieldSize: 20_000 },
    defParamCharset: 'utf8',
  }).single('file');
  return {
    async receive(req, res) {
      if (!req.is('multipart/form-data')) {
        throw new HttpProblem(415, 'Unknown kind of content', 'Send the file as multipart/form-data, in the part named "file".');
      }
      await new Promise<void>((resolve, reject) => {
        receiver(req, res, (error: unknown) => {
          if (error === undefined || error === null) resolve();
          else if (error instanceof MulterError && error.code === 'LIMIT_FILE_SIZE') {
            reject(new HttpProblem(413, 'Too large', `A file may have ${Math.floor(largestBytes / 1_000_000)} MB at most; nothing was stored.`));
          } else if (error instanceof MulterError) {
            reject(new InvalidInput([{ path: 'file', message: WORDS[error.code] ?? error.message }]));
          } else reject(new HttpProblem(400, 'The request cannot be read', 'The form broke off or is not multipart/form-data.'));
        });
      });
      const { file } = req;
      if (file === undefined) throw new InvalidInput([{ path: 'file', message: 'must hold a file' }]);
      return {
        path: file.path,
        originalName: file.originalname.replaceAll(/\p{Cc}/gu, ' ').slice(0, 200),
        bytes: file.size,
        remove: () => rm(file.path, { force: true }),
      };
    },
  };
}

/** Clears what a process that died left behind: files that no request can still be answering. */
export async function clearLeftUploads(folder: string, olderThanSeconds: number): Promise<void> {
  for (const name of await readdir(folder)) {
    const path = join(folder, name);
    const { mtimeMs } = await stat(path).catch(() => ({ mtimeMs: Date.now() }));
    if (mtimeMs < Date.now() - olderThanSeconds * 1000) await rm(path, { force: true });
  }
}
