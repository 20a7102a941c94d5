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

/** As assembly/non-bonded.ts says. */
type AddRows = (
  atomCount: number,
  atoms: number,
  constants: number,
  distanceDependent: boolean,
  one: number,
  buffer: number,
  tiny: number,
) => number;

interface Kernel {
  readonly memory: InstanceType<WebAssemblyApi['Memory']>;
  readonly addRows: AddRows;
  /** The rows whose constants the memory holds, and the blocks of atoms before them. */
  rows: NonBondedRows | undefined;
  blocks: Float64Array;
}

const PAGE = 65536;

const { WebAssembly: api, atob: fromBase64 } = globalThis as unknown as { WebAssembly?: WebAssemblyApi; atob?: (text: string) => string };

function start(): Kernel | undefined {
  if (!api || !fromBase64) return undefined;
  try {
    const memory = new api.Memory({ initial: 1 });
    const module = new api.Module(Uint8Array.from(fromBase64(NON_BONDED_KERNEL), (character) => character.charCodeAt(0)));
    const { exports } = new api.Instance(module, { env: { memory } });
    return { memory, addRows: (exports as { addRows: AddRows }).addRows, rows: undefined, blocks: new Float64Array(0) };
  } catch {
    // no vector instructions, or a page whose security policy forbids WebAssembly: the plain loop does the same
    return undefined;
  }
}

let kernel: Kernel | undefined;
let started = false;

/** Doubles that a block of two atoms and a block of two pairs take. */
const PER_BLOCK = 12;
const CONSTANTS_PER_BLOCK = 10;

/** Copies the constants of `rows` into the kernel's memory, in its order; false where there is no room for them. */
function load(target: Kernel, rows: NonBondedRows): boolean {
  const { atomCount } = rows;
  const blockCount = (atomCount + 1) >> 1;
  let pairBlocks = 0;
  for (let i = 0; i < atomCount; i++) pairBlocks += blockCount - ((i + 1) >> 1);
  const missing = 8 * (PER_BLOCK * blockCount + CONSTANTS_PER_BLOCK * pairBlocks) - target.memory.buffer.byteLength;
  try {
    if (missing > 0) target.memory.grow(Math.ceil(missing / PAGE));
  } catch {
    return false;
  }
  target.blocks = new Float64Array(target.memory.buffer, 0, PER_BLOCK * blockCount);
  const constants = new Float64Array(target.memory.buffer, 8 * target.blocks.length, CONSTANTS_PER_BLOCK * pairBlocks);
  let pair = 0;
  let at = 0;
  for (let i = 0; i < atomCount; i++)
    for (let j = (i + 1) & ~1; j < 2 * blockCount; j++) {
      const counts = j > i && j < atomCount;
      constants[at] = counts ? rows.a[pair] : 1;
      constants[at + 2] = counts ? rows.b[pair] : 1;
      constants[at + 4] = counts ? 7 * rows.d[pair] : 0;
      constants[at + 6] = counts ? 7 * rows.e[pair] : 0;
      constants[at + 8] = counts ? rows.q[pair] : 0;
      if (counts) pair++;
      at += j & 1 ? CONSTANTS_PER_BLOCK - 1 : 1;
    }
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
  const { blocks } = kernel;
  blocks.fill(0);
  for (let n = 0, at = 0; n < x.length; n += 3, at = nextAtom(at)) {
    blocks[at] = x[n];
    blocks[at + 2] = x[n + 1];
    blocks[at + 4] = x[n + 2];
  }
  const energy = kernel.addRows(rows.atomCount, 0, 8 * blocks.length, rows.dielectricModel === 'distance', 1, 0.05, 1e-24);
  for (let n = 0, at = 0; n < x.length; n += 3, at = nextAtom(at)) {
    gradient[n] += blocks[at + 6];
    gradient[n + 1] += blocks[at + 8];
    gradient[n + 2] += blocks[at + 10];
  }
  return energy;
}

/** From the place of an atom's x to that of the next atom's: the other lane of the block, or the next block. */
function nextAtom(at: number): number {
  return at % PER_BLOCK === 0 ? at + 1 : at + PER_BLOCK - 1;
}
