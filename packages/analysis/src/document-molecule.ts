import { atomicMass, atomicNumberOf, createMolecule, type Molecule, TordialError } from '@tordial/geometry';
import type { DocumentMolecule } from '@tordial/scan';

/** The molecule of a document: elements, charges and bonds in the document's order. Throws `document/element` for a symbol that is none. */
export function moleculeOfDocument({ elements, formalCharges, bonds, name }: DocumentMolecule): Molecule {
  const atomicNumbers = elements.map((symbol, atom) => {
    const number = atomicNumberOf(symbol);
    if (number === 0)
      throw new TordialError('document/element', `atom ${atom} of the document is of no known element: '${symbol}'`, { atom });
    return number;
  });
  return createMolecule({ atomicNumbers, formalCharges, bonds, name });
}

/** Masses of a document's atoms, amu: standard atomic weights, as the document keeps no isotopes. */
export function massesOfDocument({ elements }: DocumentMolecule): Float64Array {
  return Float64Array.from(elements, (symbol) => atomicMass(atomicNumberOf(symbol)));
}
