/** Van der Waals constants of every atom (MMFFVDW). Source: T. A. Halgren, J. Comput. Chem. 17, 520 (1996). */
import type { VanDerWaalsAtoms } from '../terms/van-der-waals.js';
import { lazily, numbers } from './keyed-table.js';
import { DONOR_ACCEPTOR, VAN_DER_WAALS } from './tables.generated.js';

const table = lazily(() => {
  const data = numbers(VAN_DER_WAALS);
  const byType = new Float64Array(400);
  for (let at = 0; at < data.length; at += 5) for (let n = 0; n < 4; n++) byType[4 * data[at] + n] = data[at + 1 + n];
  const donorAcceptor = new Uint8Array(100);
  for (const line of DONOR_ACCEPTOR.split('\n')) {
    const [type, letter] = line.split(' ');
    donorAcceptor[Number(type)] = letter === 'D' ? 1 : 2;
  }
  return { byType, donorAcceptor };
});

/** One entry an atom, from its numeric type. */
export function assignVanDerWaals(atomTypes: Uint8Array): VanDerWaalsAtoms {
  const { byType, donorAcceptor } = table();
  const column = (n: number) => Float64Array.from(atomTypes, (type) => byType[4 * type + n]);
  return {
    polarizability: column(0),
    effectiveElectrons: column(1),
    scaleA: column(2),
    scaleG: column(3),
    donorAcceptor: atomTypes.map((type) => donorAcceptor[type]),
  };
}
