import { TordialError } from '@tordial/geometry';

/** Runs work that Ctrl-C calls off; it then rejects with `usage/interrupted`. When the work ends, whatever it left running is called off too. */
export async function interruptible<T>(work: (signal: AbortSignal) => Promise<T>): Promise<T> {
  const stop = new AbortController();
  const interrupted = (): void => stop.abort(new TordialError('usage/interrupted', 'interrupted; what was finished before is written'));
  process.once('SIGINT', interrupted);
  try {
    return await work(stop.signal);
  } finally {
    stop.abort(new TordialError('usage/interrupted', 'the work that this belonged to has ended'));
    process.removeListener('SIGINT', interrupted);
  }
}
