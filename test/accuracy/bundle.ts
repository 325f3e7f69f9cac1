import { join } from 'node:path';
import { buildSync } from 'esbuild';

/**
 * One file of the engine with all it needs, as plain JavaScript: compiled as in production, where jest's own world would make
 * it many times slower, and in a form that a browser takes too.
 */
export function bundled(entry: string, platform: 'node' | 'browser'): string {
  const { outputFiles } = buildSync({ entryPoints: [join(__dirname, entry)], bundle: true, write: false, platform, format: 'iife', target: 'es2023', logLevel: 'silent' });
  const [file] = outputFiles;
  if (file === undefined) throw new Error(`${entry} was not bundled`);
  return file.text;
}
