/**
 * The loop of src/terms/non-bonded.ts, two pairs at a time in 128-bit vectors; formulas, names and row order are said there.
 * AssemblyScript, compiled by scripts/compile-kernel.mjs; a test holds both loops to the same energy and gradient.
 *
 * Memory is laid out by the caller: six columns of doubles - x, y, z and dE/dx, dE/dy, dE/dz - `stride` bytes apart, with room for one
 * atom more than there are, which an odd row's last pair reads and writes at strength zero; then the blocks a, b, c, q, `block` bytes apart.
 */

/** Adds every pair's gradient to the columns and returns the energy. `power` is 1 for a constant, 2 for a distance-dependent dielectric. */
export function addRows(atomCount: i32, columns: usize, stride: usize, constants: usize, block: usize, power: f64): f64 {
  const n = f64x2.splat(power);
  const k0 = f64x2.splat(2 - power);
  const k1 = f64x2.splat(power - 1);
  const one = f64x2.splat(1);
  const two = f64x2.splat(2);
  const minusSeven = f64x2.splat(-7);
  const buffer = f64x2.splat(0.05);
  const ratio = f64x2.splat(28.0 / 3.0);
  const least = f64x2.splat(1e-24);
  const end = columns + ((<usize>atomCount) << 3);
  let energy = f64x2.splat(0);
  let pair = constants;
  for (let i = columns; i < end; i += 8) {
    const xi = v128.load64_splat(i);
    const yi = v128.load64_splat(i + stride);
    const zi = v128.load64_splat(i + 2 * stride);
    let gx = f64x2.splat(0);
    let gy = f64x2.splat(0);
    let gz = f64x2.splat(0);
    for (let j = i + 8; j < end; j += 16, pair += 16) {
      const a = v128.load(pair);
      const b = v128.load(pair + block);
      const c = v128.load(pair + 2 * block);
      const q = v128.load(pair + 3 * block);
      const dx = f64x2.sub(xi, v128.load(j));
      const dy = f64x2.sub(yi, v128.load(j + stride));
      const dz = f64x2.sub(zi, v128.load(j + 2 * stride));
      const r2 = f64x2.max(f64x2.add(f64x2.add(f64x2.mul(dx, dx), f64x2.mul(dy, dy)), f64x2.mul(dz, dz)), least);
      const r = f64x2.sqrt(r2);
      const r6 = f64x2.mul(f64x2.mul(r2, r2), r2);
      const p = f64x2.add(r, a);
      const m = f64x2.add(f64x2.mul(r6, r), b);
      const s = f64x2.add(r, buffer);
      const pm = f64x2.mul(p, m);
      const sr = f64x2.mul(s, r);
      const reciprocal = f64x2.div(one, f64x2.mul(pm, sr));
      const perPM = f64x2.mul(reciprocal, sr);
      const perSR = f64x2.mul(reciprocal, pm);
      const t = f64x2.mul(perPM, m);
      const w = f64x2.mul(perPM, p);
      const u = f64x2.mul(perSR, r);
      const perR = f64x2.mul(perSR, s);

      const t2 = f64x2.mul(t, t);
      const ct7 = f64x2.mul(f64x2.mul(c, t), f64x2.mul(f64x2.mul(t2, t2), t2));
      const bw = f64x2.mul(f64x2.mul(ratio, b), w);
      const dispersion = f64x2.mul(ct7, f64x2.sub(bw, two));
      const coulomb = f64x2.mul(f64x2.mul(q, u), f64x2.add(k0, f64x2.mul(k1, u)));
      energy = f64x2.add(energy, f64x2.add(dispersion, coulomb));

      const steepness = f64x2.add(f64x2.mul(dispersion, t), f64x2.mul(f64x2.mul(ct7, bw), f64x2.mul(w, r6)));
      const slope = f64x2.sub(f64x2.mul(minusSeven, steepness), f64x2.mul(f64x2.mul(n, coulomb), u));
      const along = f64x2.mul(slope, perR);
      const fx = f64x2.mul(along, dx);
      const fy = f64x2.mul(along, dy);
      const fz = f64x2.mul(along, dz);
      gx = f64x2.add(gx, fx);
      gy = f64x2.add(gy, fy);
      gz = f64x2.add(gz, fz);
      v128.store(j + 3 * stride, f64x2.sub(v128.load(j + 3 * stride), fx));
      v128.store(j + 4 * stride, f64x2.sub(v128.load(j + 4 * stride), fy));
      v128.store(j + 5 * stride, f64x2.sub(v128.load(j + 5 * stride), fz));
    }
    addLanes(i + 3 * stride, gx);
    addLanes(i + 4 * stride, gy);
    addLanes(i + 5 * stride, gz);
  }
  return f64x2.extract_lane(energy, 0) + f64x2.extract_lane(energy, 1);
}

/** Adds both lanes of `sum` to the double at `address`. */
function addLanes(address: usize, sum: v128): void {
  store<f64>(address, load<f64>(address) + f64x2.extract_lane(sum, 0) + f64x2.extract_lane(sum, 1));
}
