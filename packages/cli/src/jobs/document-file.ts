/** Documents of our own, read from files. */
import { existsSync, readFileSync, statSync } from 'node:fs';
import { TordialError } from '@tordial/geometry';

/** The text of a file. Throws `file/missing`. */
export function readText(path: string): string {
  if (!existsSync(path) || !statSync(path).isFile())
    throw new TordialError('file/missing', `there is no file ${path}; check the path`, { file: path });
  return readFileSync(path, 'utf8');
}

/** What a reader makes of a file; its errors name the file. */
export function readFrom<T>(path: string, read: (text: string) => T): T {
  const text = readText(path);
  try {
    return read(text);
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    throw new TordialError(error.code, error.message, { file: path, ...error.place }, { cause: error });
  }
}
