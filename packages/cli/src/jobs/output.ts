/** Files appear whole or not at all: each is written beside its place and then renamed into it. */
import { accessSync, constants, mkdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { TordialError } from '@tordial/geometry/errors';

/** Makes sure that files can be written to `folder`, before any long work. Throws `output/folder`. */
export function prepareFolder(folder: string): void {
  try {
    makeFolder(folder);
    accessSync(folder, constants.W_OK);
  } catch (cause) {
    throw new TordialError(
      'output/folder',
      `the folder ${folder} cannot be written to (${reason(cause)}); name another one with -o`,
      { file: folder },
      { cause },
    );
  }
}

/** Folder by folder: Node's recursive call never returns where a parent refuses new entries without saying so, as /proc does. */
function makeFolder(folder: string): void {
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory()) return;
  const parent = dirname(folder);
  if (parent !== folder) makeFolder(parent);
  mkdirSync(folder);
}

/** Makes sure that `path` can be written, before any long work. Throws `output/folder` or `output/file`. */
export function prepareFile(path: string): void {
  prepareFolder(dirname(path));
  if (statSync(path, { throwIfNoEntry: false })?.isDirectory())
    throw new TordialError('output/file', `${path} is a folder; name a file with -o`, { file: path });
}

/** Writes one file whole. Throws `output/file`. */
export function writeWhole(path: string, content: string): void {
  const partial = join(dirname(path), `.${basename(path)}.${process.pid}.partial`);
  try {
    writeFileSync(partial, content);
    renameSync(partial, path);
  } catch (cause) {
    rmSync(partial, { force: true });
    throw new TordialError('output/file', `${path} could not be written (${reason(cause)})`, { file: path }, { cause });
  }
}

/** Writes several files of one folder. Throws `output/file`. */
export function writeFiles(folder: string, files: Readonly<Record<string, string>>): void {
  for (const [name, content] of Object.entries(files)) writeWhole(join(folder, name), content);
}

function reason(cause: unknown): string {
  return cause instanceof Error && 'code' in cause ? String(cause.code) : String(cause);
}
