/** A potential outside the process: each geometry is a QCSchema request to a command. */
import { type Coordinates, type Molecule, TordialError } from '@tordial/geometry';
import pLimit from 'p-limit';
import type { EngineConfig } from './engine-config.js';
import { atomicInput, type EngineAnswer, readAtomicResult } from './qcschema.js';
import { type ResultCache, resultCache } from './result-cache.js';
import { runCommand } from './run-command.js';

export interface Engine {
  readonly atomCount: number;
  /** Energy (kcal/mol) and gradient (kcal/mol/angstrom) at x (angstrom). */
  evaluate(x: Coordinates): Promise<EngineAnswer>;
  /** Energy alone, kcal/mol: what single points need. */
  energy(x: Coordinates): Promise<number>;
}

/**
 * The engine of a configuration, for one molecule. Requests beyond `concurrency` wait; answers are kept in the cache, and only good ones.
 * Its methods throw `engine/missing`, `engine/timeout`, `engine/failed` (with the engine's own text) and `engine/answer`.
 */
export function openEngine(molecule: Molecule, config: EngineConfig, signal?: AbortSignal): Engine {
  const queue = pLimit(config.concurrency);
  const cache = config.cache === null ? undefined : resultCache(config.cache);
  const ask = (x: Coordinates, driver: 'energy' | 'gradient'): Promise<EngineAnswer> => {
    const request = JSON.stringify(atomicInput(molecule, x, config, driver));
    return queue(() => answer(request, (text) => readAtomicResult(text, molecule.atomCount, driver), config, cache, signal));
  };
  return {
    atomCount: molecule.atomCount,
    evaluate: (x) => ask(x, 'gradient'),
    energy: async (x) => (await ask(x, 'energy')).energy,
  };
}

async function answer(
  request: string,
  read: (text: string) => EngineAnswer,
  { command, timeout, retries }: EngineConfig,
  cache: ResultCache | undefined,
  signal: AbortSignal | undefined,
): Promise<EngineAnswer> {
  // another command may compute the same request differently, so it is part of the key
  const key = JSON.stringify([command, request]);
  const kept = cache?.get(key);
  if (kept !== undefined) return read(kept);
  for (let attempt = 0; ; attempt++) {
    signal?.throwIfAborted();
    try {
      const { exitCode, stdout, stderr } = await runCommand(command, request, timeout, signal);
      if (exitCode !== 0 && stdout.trim() === '')
        throw new TordialError(
          'engine/failed',
          `the engine ${command[0]} ended with exit code ${exitCode}: ${stderr.trim() || 'it printed nothing'}`,
        );
      const result = read(stdout);
      cache?.put(key, stdout);
      return result;
    } catch (error) {
      const again = error instanceof TordialError && error.code !== 'engine/missing';
      if (!again || attempt >= retries) throw error;
    }
  }
}
