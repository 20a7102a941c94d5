/** The description of an engine that a user keeps in a JSON file. */
import { TordialError } from '@tordial/geometry';
import type { EngineModel } from './qcschema.js';

export interface EngineConfig extends EngineModel {
  /** Program and arguments; it reads an AtomicInput on standard input and prints an AtomicResult. No shell is involved. */
  readonly command: readonly string[];
  /** Seconds that one answer may take. */
  readonly timeout: number;
  /** How often a failed request is asked again. */
  readonly retries: number;
  /** Requests that may run at the same time. */
  readonly concurrency: number;
  /** Folder of answers kept between runs; null keeps none. */
  readonly cache: string | null;
}

const KNOWN = ['command', 'method', 'basis', 'keywords', 'multiplicity', 'timeout', 'retries', 'concurrency', 'cache'];

/** Checks a configuration read from JSON and fills in what it leaves out. Throws `engine/config`, naming the field. */
export function engineConfig(value: unknown): EngineConfig {
  if (!isRecord(value)) throw wrong('it must be a JSON object with "command" and "method"');
  const unknown = Object.keys(value).find((key) => !KNOWN.includes(key));
  if (unknown !== undefined) throw wrong(`"${unknown}" is not known; known are ${KNOWN.join(', ')}`);
  const {
    command,
    method,
    basis = null,
    keywords = {},
    multiplicity = 1,
    timeout = 600,
    retries = 1,
    concurrency = 1,
    cache = null,
  } = value;
  if (!isArgumentList(command))
    throw wrong('"command" must be a list of program and arguments, not one line of text: ["program", "argument"]');
  if (typeof method !== 'string' || method === '') throw wrong('"method" must name the level of theory, such as "hf"');
  if (basis !== null && typeof basis !== 'string') throw wrong('"basis" must be a text or null');
  if (!isRecord(keywords)) throw wrong('"keywords" must be an object');
  if (cache !== null && typeof cache !== 'string') throw wrong('"cache" must be a folder or null');
  return {
    command,
    method,
    basis,
    keywords,
    multiplicity: numberFrom('multiplicity', multiplicity, 1, true),
    timeout: numberFrom('timeout', timeout, 0.001, false),
    retries: numberFrom('retries', retries, 0, true),
    concurrency: numberFrom('concurrency', concurrency, 1, true),
    cache,
  };
}

function numberFrom(name: string, value: unknown, least: number, whole: boolean): number {
  if (typeof value !== 'number' || !Number.isFinite(value) || value < least || (whole && !Number.isInteger(value)))
    throw wrong(`"${name}" must be a ${whole ? 'whole ' : ''}number from ${least} up`);
  return value;
}

function isArgumentList(value: unknown): value is string[] {
  return Array.isArray(value) && value.length > 0 && value.every((word) => typeof word === 'string') && value[0] !== '';
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function wrong(what: string): TordialError {
  return new TordialError('engine/config', `the engine's configuration is wrong: ${what}`);
}
