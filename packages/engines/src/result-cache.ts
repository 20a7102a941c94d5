/** Answers kept on disk under the content of their request, so that an interrupted scan goes on where it was. */
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

export interface ResultCache {
  get(request: string): string | undefined;
  put(request: string, answer: string): void;
}

/** A cache in a folder, made when first written to; one file an answer, which appears whole. */
export function resultCache(folder: string): ResultCache {
  const place = (request: string): string => join(folder, `${createHash('sha256').update(request).digest('hex')}.json`);
  return {
    get(request) {
      const path = place(request);
      return existsSync(path) ? readFileSync(path, 'utf8') : undefined;
    },
    put(request, answer) {
      mkdirSync(folder, { recursive: true });
      const path = place(request);
      const partial = `${path}.${process.pid}.partial`;
      writeFileSync(partial, answer);
      renameSync(partial, path);
    },
  };
}
