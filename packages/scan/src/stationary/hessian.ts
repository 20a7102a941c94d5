/**
 * The Hessian of any potential, by central differences of its gradient.
 *
 *   H_ij = [ g_i(x + h e_j) - g_i(x - h e_j) ] / (2h)
 *
 * made symmetric. The error is h^2/6 times the fourth derivative, and the gradient's noise divided by h.
 */
import { type Coordinates, TordialError } from '@tordial/geometry';
import type { Calculation, Question } from '../potential.js';

/** Displacement, angstrom: stretching anharmonicity then costs 0.003 kcal/mol/angstrom^2, soft motions far less. */
const DISPLACEMENT = 1e-3;

/**
 * The Hessian at x, kcal/mol/angstrom^2, row-major, symmetric: two gradients a coordinate. `displacement` in angstrom (0.001) should grow with the
 * noise of the potential's gradient. Throws `scan/energy` where a gradient is not finite.
 */
export function* numericalHessian(x: Coordinates, displacement: number = DISPLACEMENT): Calculation<Float64Array> {
  const size = x.length;
  const hessian = new Float64Array(size * size);
  const question: Question = { x: x.slice(), gradient: new Float64Array(size) };
  for (let j = 0; j < size; j++) {
    for (const sign of [1, -1]) {
      question.x.set(x);
      question.x[j] += sign * displacement;
      yield question;
      for (let i = 0; i < size; i++) hessian[i * size + j] += (sign * question.gradient[i]) / (2 * displacement);
    }
  }
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      const mean = (hessian[i * size + j] + hessian[j * size + i]) / 2;
      if (!Number.isFinite(mean))
        throw new TordialError('scan/energy', `the potential gives no finite gradient near coordinate ${i} of a stationary point`, {
          atom: Math.floor(i / 3),
        });
      hessian[i * size + j] = mean;
      hessian[j * size + i] = mean;
    }
  return hessian;
}
