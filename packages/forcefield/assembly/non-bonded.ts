/**
 * The loop of src/terms/non-bonded.ts, two pairs at a time in 128-bit vectors; formula and names are said there.
 * AssemblyScript, compiled by scripts/compile-kernel.mjs; a test holds both loops to the same energy and gradient.
 *
 * Atoms stand in blocks of two: x, x, y, y, z, z and dE/dx, dE/dx, dE/dy, ... as 12 doubles. A row of pairs begins with the block that
 * holds atom i + 1 and so never straddles blocks; a lane that holds atom i itself, or no atom, has strength zero. The constants follow in
 * the order of the loop, 10 doubles a block: a, a, b, b, 7d, 7d, 7e, 7e, q, q.
 *
 * What is constant comes in as arguments: the compiler would build a literal anew, in three instructions, at every use.
 */

const BLOCK: usize = 96;
const CONSTANTS: usize = 80;

/** Adds every pair's gradient to the blocks and returns the energy. `atoms` and `constants` are addresses; the rest is 1, 0.05 and 1e-24. */
export function addRows(atomCount: i32, atoms: usize, constants: usize, distanceDependent: bool, unit: f64, margin: f64, least: f64): f64 {
  const one = f64x2.splat(unit);
  const buffer = f64x2.splat(margin);
  const tiny = f64x2.splat(least);
  const end = atoms + <usize>((atomCount + 1) >> 1) * BLOCK;
  let dispersion = f64x2.splat(0);
  let electrostatic = f64x2.splat(0);
  let pair = constants;
  for (let atom = 0; atom < atomCount; atom++) {
    const i = atoms + <usize>(atom >> 1) * BLOCK + ((<usize>(atom & 1)) << 3);
    const xi = v128.load64_splat(i);
    const yi = v128.load64_splat(i, 16);
    const zi = v128.load64_splat(i, 32);
    let gx = f64x2.splat(0);
    let gy = f64x2.splat(0);
    let gz = f64x2.splat(0);
    for (let j = atoms + <usize>((atom + 1) >> 1) * BLOCK; j < end; j += BLOCK, pair += CONSTANTS) {
      const dx = f64x2.sub(xi, v128.load(j));
      const dy = f64x2.sub(yi, v128.load(j, 16));
      const dz = f64x2.sub(zi, v128.load(j, 32));
      const r2 = f64x2.add(f64x2.add(f64x2.add(f64x2.mul(dx, dx), f64x2.mul(dy, dy)), f64x2.mul(dz, dz)), tiny);
      const r = f64x2.sqrt(r2);
      const r6 = f64x2.mul(f64x2.mul(r2, r2), r2);
      const s = f64x2.add(r, buffer);
      const t = f64x2.div(one, f64x2.add(r, v128.load(pair)));
      const w = f64x2.div(one, f64x2.add(f64x2.mul(r6, r), v128.load(pair, 16)));
      const v = f64x2.div(one, f64x2.mul(r, s));
      const u = f64x2.mul(v, r);

      const t2 = f64x2.mul(t, t);
      const t7 = f64x2.mul(f64x2.mul(f64x2.mul(t2, t2), t2), t);
      const dw = f64x2.mul(v128.load(pair, 32), w);
      const well = f64x2.sub(dw, v128.load(pair, 48));
      let coulomb = f64x2.mul(v128.load(pair, 64), u);
      let pull = f64x2.mul(coulomb, u);
      if (distanceDependent) {
        coulomb = pull;
        pull = f64x2.mul(f64x2.mul(pull, u), f64x2.splat(2));
      }
      dispersion = f64x2.add(dispersion, f64x2.mul(t7, well));
      electrostatic = f64x2.add(electrostatic, coulomb);

      const steepness = f64x2.mul(t7, f64x2.add(f64x2.mul(well, t), f64x2.mul(f64x2.mul(dw, w), r6)));
      const push = f64x2.mul(f64x2.add(steepness, pull), f64x2.mul(v, s));
      const fx = f64x2.mul(push, dx);
      const fy = f64x2.mul(push, dy);
      const fz = f64x2.mul(push, dz);
      gx = f64x2.add(gx, fx);
      gy = f64x2.add(gy, fy);
      gz = f64x2.add(gz, fz);
      v128.store(j, f64x2.add(v128.load(j, 48), fx), 48);
      v128.store(j, f64x2.add(v128.load(j, 64), fy), 64);
      v128.store(j, f64x2.add(v128.load(j, 80), fz), 80);
    }
    store<f64>(i, load<f64>(i, 48) - sumOfLanes(gx), 48);
    store<f64>(i, load<f64>(i, 64) - sumOfLanes(gy), 64);
    store<f64>(i, load<f64>(i, 80) - sumOfLanes(gz), 80);
  }
  return sumOfLanes(dispersion) / 7 + sumOfLanes(electrostatic);
}

function sumOfLanes(vector: v128): f64 {
  return f64x2.extract_lane(vector, 0) + f64x2.extract_lane(vector, 1);
}
