/**
 * The non-bonded loop in 128-bit vectors: 1 kB of WebAssembly, embedded, started when first used and without waiting, in Node, workers and
 * browsers alike. One instance serves the thread; its memory holds the rows that were evaluated last, so many molecules one after the
 * other need no more of it than the largest.
 */
import type { NonBondedRows } from '../terms/non-bonded.js';
import { NON_BONDED_KERNEL } from './non-bonded.generated.js';

/** The part of the WebAssembly API that is used here; the standard libraries of ECMAScript do not describe it. */
interface WebAssemblyApi {
  readonly Memory: new (limits: { initial: number }) => { readonly buffer: ArrayBuffer; grow(pages: number): number };
  readonly Module: new (bytes: Uint8Array) => object;
  readonly Instance: new (module: object, imports: object) => { readonly exports: object };
}

type AddRows = (atomCount: number, columns: number, stride: number, constants: number, block: number, power: number) => number;

interface Kernel {
  readonly memory: InstanceType<WebAssemblyApi['Memory']>;
  readonly addRows: AddRows;
  /** The rows whose constants the memory holds, and the six columns x, y, z and their gradient before them. */
  rows: NonBondedRows | undefined;
  columns: Float64Array;
}

const PAGE = 65536;

const { WebAssembly: api, atob: fromBase64 } = globalThis as unknown as { WebAssembly?: WebAssemblyApi; atob?: (text: string) => string };

function start(): Kernel | undefined {
  if (!api || !fromBase64) return undefined;
  try {
    const memory = new api.Memory({ initial: 1 });
    const module = new api.Module(Uint8Array.from(fromBase64(NON_BONDED_KERNEL), (character) => character.charCodeAt(0)));
    const { exports } = new api.Instance(module, { env: { memory } });
    return { memory, addRows: (exports as { addRows: AddRows }).addRows, rows: undefined, columns: new Float64Array(0) };
  } catch {
    // no vector instructions, or a page whose security policy forbids WebAssembly: the plain loop does the same
    return undefined;
  }
}

let kernel: Kernel | undefined;
let started = false;

/** Length of one column in doubles: one atom more than there are, even, so that the constants behind the columns are aligned. */
function columnLength(rows: NonBondedRows): number {
  return (rows.atomCount + 2) & ~1;
}

/** Copies the constants of `rows` into the kernel's memory; false where there is no room for them. */
function load(target: Kernel, rows: NonBondedRows): boolean {
  const length = 6 * columnLength(rows);
  const missing = 8 * (length + 4 * rows.a.length) - target.memory.buffer.byteLength;
  try {
    if (missing > 0) target.memory.grow(Math.ceil(missing / PAGE));
  } catch {
    return false;
  }
  target.columns = new Float64Array(target.memory.buffer, 0, length);
  target.columns.fill(0);
  const constants = new Float64Array(target.memory.buffer, 8 * length, 4 * rows.a.length);
  [rows.a, rows.b, rows.c, rows.q].forEach((block, n) => {
    constants.set(block, n * rows.a.length);
  });
  target.rows = rows;
  return true;
}

/**
 * As `addNonBonded`: adds the gradient (kcal/mol/angstrom) of every pair to `gradient` and returns the energy (kcal/mol).
 * Undefined, with `gradient` untouched, where WebAssembly with vectors is not to be had.
 */
export function addNonBondedVectors(rows: NonBondedRows, x: Float64Array, gradient: Float64Array): number | undefined {
  if (!started) {
    kernel = start();
    started = true;
  }
  if (!kernel || (kernel.rows !== rows && !load(kernel, rows))) return undefined;
  const { columns } = kernel;
  const stride = columnLength(rows);
  for (let n = 0, atom = 0; n < x.length; n += 3, atom++) {
    columns[atom] = x[n];
    columns[atom + stride] = x[n + 1];
    columns[atom + 2 * stride] = x[n + 2];
  }
  columns.fill(0, 3 * stride);
  const power = rows.dielectricModel === 'constant' ? 1 : 2;
  const energy = kernel.addRows(rows.atomCount, 0, 8 * stride, 48 * stride, 8 * rows.a.length, power);
  for (let n = 0, atom = 3 * stride; n < x.length; n += 3, atom++) {
    gradient[n] += columns[atom];
    gradient[n + 1] += columns[atom + stride];
    gradient[n + 2] += columns[atom + 2 * stride];
  }
  return energy;
}
