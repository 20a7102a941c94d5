/**
 * Seeded random numbers: xoshiro128** with its state filled by splitmix32, 32-bit integer arithmetic only, so that a seed gives the same
 * numbers on every machine.
 *
 * Source: D. Blackman, S. Vigna, ACM Trans. Math. Softw. 47, 36 (2021).
 */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Normal with mean 0 and variance 1 (Box and Muller, Ann. Math. Stat. 29, 610 (1958)). */
  normal(): number;
}

/** A generator for a seed; any finite number is a seed, its integer part modulo 2^32 counts. */
export function seededRandom(seed: number): Random {
  let mix = seed | 0;
  const next = (): number => {
    mix = (mix + 0x9e3779b9) | 0;
    let z = mix ^ (mix >>> 16);
    z = Math.imul(z, 0x21f0aaad);
    z ^= z >>> 15;
    z = Math.imul(z, 0x735a2d97);
    return z ^ (z >>> 15);
  };
  let a = next();
  let b = next();
  let c = next();
  let d = next();
  const uniform = (): number => {
    const scrambled = Math.imul(b, 5);
    const result = Math.imul((scrambled << 7) | (scrambled >>> 25), 9);
    const shifted = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= shifted;
    d = (d << 11) | (d >>> 21);
    return (result >>> 0) / 4294967296;
  };
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}
