/**
 * What one step teaches about a Hessian of any signature.
 *
 *   xi = dg - H dx
 *   dH = f xi xi^T / (xi.dx) + (1 - f) [ (xi dx^T + dx xi^T) / dx.dx - (xi.dx) dx dx^T / (dx.dx)^2 ],   f = (xi.dx)^2 / ((xi.xi)(dx.dx))
 *
 * Between the symmetric rank one update (f = 1) and that of Powell (f = 0); neither forces the Hessian to be positive definite.
 * Source: J. M. Bofill, J. Comput. Chem. 15, 1 (1994).
 */
import { dot } from './projected-modes.js';

/** Updates `hessian` (row-major) in place from a step and the change of gradient over it. */
export function bofillUpdate(hessian: Float64Array, step: Float64Array, gradientChange: Float64Array): void {
  const size = step.length;
  const xi = Float64Array.from(gradientChange, (value, i) => value - dot(hessian.subarray(i * size, (i + 1) * size), step));
  const ss = dot(step, step);
  const xx = dot(xi, xi);
  const xs = dot(xi, step);
  // nothing new, or nothing moved
  if (!(xx > 1e-20) || !(ss > 1e-20)) return;
  const f = (xs * xs) / (xx * ss);
  // f / xi.dx, written so that it stays finite where xi.dx vanishes
  const rankOne = xs / (xx * ss);
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      const change = rankOne * xi[i] * xi[j] + (1 - f) * ((xi[i] * step[j] + step[i] * xi[j]) / ss - (xs * step[i] * step[j]) / (ss * ss));
      hessian[i * size + j] += change;
      if (j < i) hessian[j * size + i] += change;
    }
}
