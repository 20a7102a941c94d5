/** The engine that a configuration file describes. */
import { existsSync, readFileSync } from 'node:fs';
import { dirname, resolve } from 'node:path';
import { type EngineConfig, engineConfig } from '@tordial/engines';
import { TordialError } from '@tordial/geometry';

/** Reads it; a cache is meant from the folder of the file. Throws `file/missing` and `engine/config`. */
export function readEngineConfig(path: string): EngineConfig {
  if (!existsSync(path)) throw new TordialError('file/missing', `there is no file ${path}`, { file: path });
  let value: unknown;
  try {
    value = JSON.parse(readFileSync(path, 'utf8'));
  } catch (cause) {
    throw new TordialError(
      'engine/config',
      `${path} is not JSON (${cause instanceof Error ? cause.message : String(cause)})`,
      { file: path },
      { cause },
    );
  }
  const config = engineConfig(value);
  return { ...config, cache: config.cache === null ? null : resolve(dirname(path), config.cache) };
}
