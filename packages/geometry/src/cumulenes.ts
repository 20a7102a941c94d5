/** Chains of cumulated double bonds. */
import type { Molecule } from './molecule.js';

/**
 * Every chain of two or more cumulated double bonds as its atoms from end to end, the lower end first; inner atoms have no other neighbours.
 * An even number of double bonds makes an axis with crossed ends (allene), an odd one a flat unit like a double bond (butatriene).
 */
export function cumulatedChains({ atomCount, neighbours, bonds }: Pick<Molecule, 'atomCount' | 'neighbours' | 'bonds'>): number[][] {
  const doubles = (i: number) => {
    const partners: number[] = [];
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++)
      if (bonds.order[neighbours.bond[n]] === 2) partners.push(neighbours.atom[n]);
    return partners;
  };
  const degree = (i: number) => neighbours.start[i + 1] - neighbours.start[i];
  const chains: number[][] = [];
  for (let end = 0; end < atomCount; end++) {
    const first = doubles(end);
    if (first.length !== 1) continue;
    const chain = [end, first[0]];
    for (let next = doubles(first[0]); next.length === 2 && degree(chain[chain.length - 1]) === 2; next = doubles(chain[chain.length - 1]))
      chain.push(next[0] === chain[chain.length - 2] ? next[1] : next[0]);
    const last = chain[chain.length - 1];
    if (chain.length > 2 && end < last && doubles(last).length === 1) chains.push(chain);
  }
  return chains;
}
