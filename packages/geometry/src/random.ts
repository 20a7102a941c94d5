/**
 * Seeded random numbers: xoshiro128** with its state filled by a 32-bit splitmix, integer arithmetic only, so that a seed gives the same
 * numbers on every machine.
 *
 * Sources: D. Blackman, S. Vigna, ACM Trans. Math. Softw. 47, 36 (2021); G. L. Steele, D. Lea, C. H. Flood, ACM SIGPLAN Not. 49, 453 (2014).
 */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Normal with mean 0 and variance 1 (G. E. P. Box, M. E. Muller, Ann. Math. Stat. 29, 610 (1958)). */
  normal(): number;
}

/** A generator for a seed; any finite number is a seed, its integer part modulo 2^32 counts. */
export function seededRandom(seed: number): Random {
  const fill = splitmix(seed);
  const next = xoshiro(fill(), fill(), fill(), fill());
  const uniform = () => next() / 4294967296;
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}

/** Integers of 32 bits from a counter that the golden ratio moves on. */
function splitmix(seed: number): () => number {
  let counter = seed | 0;
  return () => {
    counter = (counter + 0x9e3779b9) | 0;
    let z = counter ^ (counter >>> 16);
    z = Math.imul(z, 0x21f0aaad);
    z ^= z >>> 15;
    z = Math.imul(z, 0x735a2d97);
    return z ^ (z >>> 15);
  };
}

/** xoshiro128** from its four words of state: integers in [0, 2^32). */
export function xoshiro(a: number, b: number, c: number, d: number): () => number {
  let [s0, s1, s2, s3] = [a | 0, b | 0, c | 0, d | 0];
  return () => {
    const scrambled = Math.imul(s1, 5);
    const result = Math.imul((scrambled << 7) | (scrambled >>> 25), 9);
    const shifted = s1 << 9;
    s2 ^= s0;
    s3 ^= s1;
    s1 ^= s2;
    s0 ^= s3;
    s2 ^= shifted;
    s3 = (s3 << 11) | (s3 >>> 21);
    return result >>> 0;
  };
}
