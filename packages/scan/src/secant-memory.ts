/** What a minimiser has learnt about the curvature: the last few steps and what they did to the gradient. */

/** Rows of `length` values; row (next - 1) is the newest pair. */
export interface SecantMemory {
  readonly length: number;
  readonly capacity: number;
  /** Steps s and changes of the gradient y. */
  readonly s: Float64Array;
  readonly y: Float64Array;
  /** 1 / (s . y) of each row. */
  readonly rho: Float64Array;
  readonly alpha: Float64Array;
  /** Vectors that a minimisation works with and leaves behind: a scan makes thousands, and memory costs more than the arithmetic. */
  readonly work: WorkingVectors;
  count: number;
  next: number;
}

/** Of the length of the coordinates each. */
export interface WorkingVectors {
  readonly reduced: Float64Array;
  readonly trialReduced: Float64Array;
  readonly direction: Float64Array;
  readonly change: Float64Array;
  readonly question: { readonly x: Float64Array; readonly gradient: Float64Array };
}

/** An empty memory for vectors of `length` values. */
export function secantMemory(length: number, capacity: number): SecantMemory {
  return {
    length,
    capacity,
    s: new Float64Array(length * capacity),
    y: new Float64Array(length * capacity),
    rho: new Float64Array(capacity),
    alpha: new Float64Array(capacity),
    work: {
      reduced: new Float64Array(length),
      trialReduced: new Float64Array(length),
      direction: new Float64Array(length),
      change: new Float64Array(length),
      question: { x: new Float64Array(length), gradient: new Float64Array(length) },
    },
    count: 0,
    next: 0,
  };
}

/** Forgets everything. */
export function forget(memory: SecantMemory): void {
  memory.count = 0;
  memory.next = 0;
}

/** Keeps a pair s, y if the curvature along s is positive; says whether it did. */
export function remember(memory: SecantMemory, s: Float64Array, y: Float64Array): boolean {
  const { length, capacity } = memory;
  let sy = 0;
  let ss = 0;
  let yy = 0;
  for (let k = 0; k < length; k++) {
    sy += s[k] * y[k];
    ss += s[k] * s[k];
    yy += y[k] * y[k];
  }
  if (!(sy > 1e-8 * Math.sqrt(ss * yy))) return false;
  const at = memory.next * length;
  memory.s.set(s, at);
  memory.y.set(y, at);
  memory.rho[memory.next] = 1 / sy;
  memory.next = (memory.next + 1) % capacity;
  memory.count = Math.min(memory.count + 1, capacity);
  return true;
}

/**
 * Writes the search direction -H g into `direction`, where H is P^-1 corrected by the remembered pairs; `work` is overwritten.
 *
 * Source: J. Nocedal, Math. Comput. 35, 773 (1980). P is asked once, and may be another one than when the pairs were made.
 */
export function searchDirection(
  memory: SecantMemory,
  preconditioner: { solve(v: Float64Array, out: Float64Array): void },
  g: Float64Array,
  direction: Float64Array,
  work: Float64Array,
): void {
  const { length, capacity, s, y, rho, alpha, count, next } = memory;
  for (let k = 0; k < length; k++) work[k] = -g[k];
  for (let n = 1; n <= count; n++) {
    const row = (next - n + capacity) % capacity;
    const at = row * length;
    let sum = 0;
    for (let k = 0; k < length; k++) sum += s[at + k] * work[k];
    const a = rho[row] * sum;
    alpha[row] = a;
    for (let k = 0; k < length; k++) work[k] -= a * y[at + k];
  }
  preconditioner.solve(work, direction);
  for (let n = count; n >= 1; n--) {
    const row = (next - n + capacity) % capacity;
    const at = row * length;
    let sum = 0;
    for (let k = 0; k < length; k++) sum += y[at + k] * direction[k];
    const b = alpha[row] - rho[row] * sum;
    for (let k = 0; k < length; k++) direction[k] += b * s[at + k];
  }
}
