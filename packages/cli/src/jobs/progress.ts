/** Long work tells how far it is, on standard error: a bar on a terminal, now and then a line elsewhere. */
import { Presets, SingleBar } from 'cli-progress';

export interface Progress {
  update(done: number, total: number): void;
  stop(): void;
}

const LINE_EVERY_MS = 5000;

export function progress(label: string): Progress {
  return process.stderr.isTTY ? bar(label) : lines(label);
}

function bar(label: string): Progress {
  const drawn = new SingleBar(
    { format: `${label} {bar} {value}/{total}`, stream: process.stderr, hideCursor: true, clearOnComplete: true },
    Presets.rect,
  );
  let started = false;
  return {
    update(done, total) {
      if (!started) drawn.start(total, done);
      started = true;
      drawn.setTotal(total);
      drawn.update(done);
    },
    stop: () => drawn.stop(),
  };
}

function lines(label: string): Progress {
  let next = performance.now() + LINE_EVERY_MS;
  return {
    update(done, total) {
      if (performance.now() < next) return;
      next = performance.now() + LINE_EVERY_MS;
      process.stderr.write(`${label} ${done}/${total}\n`);
    },
    stop: () => undefined,
  };
}
