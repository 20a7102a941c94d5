import type { Abortable, Calculation, Potential } from '@tordial/scan';

/** Milliseconds of work between two turns of the event loop. */
const TURN = 40;

/** Runs a calculation on a potential in this thread, giving the event loop a turn now and then. */
export async function driveInTurns<T>(calculation: Calculation<T>, potential: Potential, signal?: Abortable): Promise<T> {
  let pause = performance.now() + TURN;
  let step = calculation.next(0);
  while (!step.done) {
    if (performance.now() > pause) {
      await new Promise<void>((resolve) => setTimeout(resolve, 0));
      signal?.throwIfAborted();
      pause = performance.now() + TURN;
    }
    step = calculation.next(potential.evaluate(step.value.x, step.value.gradient));
  }
  return step.value;
}
