/**
 * The chemical elements: symbols, standard atomic weights, masses of common isotopes, covalent radii.
 *
 * Sources: atomic weights, IUPAC/CIAAW 2021 abridged values (T. Prohaska et al., Pure Appl. Chem. 94, 573 (2022)); elements without a
 * stable isotope carry the mass number of their longest-lived one. Isotope masses: AME2020 (M. Wang et al., Chin. Phys. C 45, 030003
 * (2021)). Covalent radii: B. Cordero et al., Dalton Trans. 2832 (2008); sp3 carbon, high-spin Mn, Fe and Co.
 */

const SYMBOLS =
  'H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og'.split(
    ' ',
  );

const WEIGHTS = [
  1.008, 4.0026, 6.94, 9.0122, 10.81, 12.011, 14.007, 15.999, 18.998, 20.18, 22.99, 24.305, 26.982, 28.085, 30.974, 32.06, 35.45, 39.95,
  39.098, 40.078, 44.956, 47.867, 50.942, 51.996, 54.938, 55.845, 58.933, 58.693, 63.546, 65.38, 69.723, 72.63, 74.922, 78.971, 79.904,
  83.798, 85.468, 87.62, 88.906, 91.224, 92.906, 95.95, 97, 101.07, 102.91, 106.42, 107.87, 112.41, 114.82, 118.71, 121.76, 127.6, 126.9,
  131.29, 132.91, 137.33, 138.91, 140.12, 140.91, 144.24, 145, 150.36, 151.96, 157.25, 158.93, 162.5, 164.93, 167.26, 168.93, 173.05,
  174.97, 178.49, 180.95, 183.84, 186.21, 190.23, 192.22, 195.08, 196.97, 200.59, 204.38, 207.2, 208.98, 209, 210, 222, 223, 226, 227,
  232.04, 231.04, 238.03, 237, 244, 243, 247, 247, 251, 252, 257, 258, 259, 262, 267, 268, 269, 270, 269, 277, 281, 282, 285, 286, 290, 290,
  293, 294, 294,
];

const ISOTOPE_MASSES: Readonly<Record<string, number>> = {
  '1H': 1.007825,
  '2H': 2.014102,
  '3H': 3.016049,
  '6Li': 6.015123,
  '7Li': 7.016003,
  '10B': 10.012937,
  '11B': 11.009305,
  '11C': 11.011433,
  '12C': 12,
  '13C': 13.003355,
  '14C': 14.003242,
  '13N': 13.005739,
  '14N': 14.003074,
  '15N': 15.000109,
  '15O': 15.003066,
  '16O': 15.994915,
  '17O': 16.999132,
  '18O': 17.99916,
  '18F': 18.000937,
  '19F': 18.998403,
  '28Si': 27.976927,
  '29Si': 28.976495,
  '30Si': 29.97377,
  '31P': 30.973762,
  '32P': 31.973908,
  '33P': 32.971726,
  '32S': 31.972071,
  '33S': 32.971459,
  '34S': 33.967867,
  '35S': 34.969032,
  '36S': 35.967081,
  '35Cl': 34.968853,
  '36Cl': 35.968307,
  '37Cl': 36.965903,
  '74Se': 73.922476,
  '76Se': 75.919214,
  '77Se': 76.919914,
  '78Se': 77.917309,
  '80Se': 79.916522,
  '82Se': 81.9167,
  '79Br': 78.918338,
  '81Br': 80.91629,
  '123I': 122.90559,
  '124I': 123.90621,
  '125I': 124.904629,
  '127I': 126.904473,
  '129I': 128.904984,
  '131I': 130.906126,
};

const COVALENT_RADII = [
  0.31, 0.28, 1.28, 0.96, 0.84, 0.76, 0.71, 0.66, 0.57, 0.58, 1.66, 1.41, 1.21, 1.11, 1.07, 1.05, 1.02, 1.06, 2.03, 1.76, 1.7, 1.6, 1.53,
  1.39, 1.61, 1.52, 1.5, 1.24, 1.32, 1.22, 1.22, 1.2, 1.19, 1.2, 1.2, 1.16, 2.2, 1.95, 1.9, 1.75, 1.64, 1.54, 1.47, 1.46, 1.42, 1.39, 1.45,
  1.44, 1.42, 1.39, 1.39, 1.38, 1.39, 1.4, 2.44, 2.15, 2.07, 2.04, 2.03, 2.01, 1.99, 1.98, 1.98, 1.96, 1.94, 1.92, 1.92, 1.89, 1.9, 1.87,
  1.87, 1.75, 1.7, 1.62, 1.51, 1.44, 1.41, 1.36, 1.36, 1.32, 1.45, 1.46, 1.48, 1.4, 1.5, 1.5, 2.6, 2.21, 2.15, 2.06, 2, 1.96, 1.9, 1.87,
  1.8, 1.69,
];

const NUMBER_OF = new Map(SYMBOLS.map((symbol, n) => [symbol, n + 1]));

/** Symbol of an element, '?' for a number outside 1-118. */
export function elementSymbol(atomicNumber: number): string {
  return SYMBOLS[atomicNumber - 1] ?? '?';
}

/** Atomic number of a symbol as IUPAC writes it ('Cl', not 'CL'); 0 when there is no such element. */
export function atomicNumberOf(symbol: string): number {
  return NUMBER_OF.get(symbol) ?? 0;
}

/** Standard atomic weight in amu (abridged to five figures); 0 for a number outside 1-118. */
export function atomicMass(atomicNumber: number): number {
  return WEIGHTS[atomicNumber - 1] ?? 0;
}

/** Mass of one isotope in amu, the mass number itself where the table above has no entry; mass number 0 gives the atomic weight. */
export function isotopeMass(atomicNumber: number, massNumber: number): number {
  if (massNumber === 0) return atomicMass(atomicNumber);
  return ISOTOPE_MASSES[`${massNumber}${elementSymbol(atomicNumber)}`] ?? massNumber;
}

/** Single-bond covalent radius in angstrom (H to Cm); beyond curium the value of curium. */
export function covalentRadius(atomicNumber: number): number {
  return COVALENT_RADII[Math.min(Math.max(atomicNumber, 1), COVALENT_RADII.length) - 1];
}

/** Group of the periodic table by valence electrons, 1-8, for main-group elements; 0 for transition metals, lanthanoids, actinoids. */
export function valenceElectrons(atomicNumber: number): number {
  if (atomicNumber <= 2) return atomicNumber === 1 ? 1 : 8;
  for (const noble of [10, 18, 36, 54, 86, 118]) {
    if (atomicNumber > noble) continue;
    const fromEnd = noble - atomicNumber;
    if (fromEnd < 6) return 8 - fromEnd;
    const period = noble === 10 || noble === 18 ? 8 : noble === 36 || noble === 54 ? 18 : 32;
    const fromStart = period - fromEnd;
    return fromStart <= 2 ? fromStart : 0;
  }
  return 0;
}
