/** An analysis as tables for people: rotamers and populations, barriers and what was proved of them, processes at each temperature, cautions. */
import {
  type AnalysedProcess,
  durationInWords,
  type ProfileAnalysis,
  type ProfileRotorResult,
  type Range,
  type WellThermodynamics,
} from '@tordial/analysis';
import { degrees } from '@tordial/geometry';
import { type ProfileDocument, type ProfileProvedPoint, perKcal } from '@tordial/scan';
import type { DocumentAnalysis } from '../profile-analysis.js';
import { shownAngle } from './shown-angle.js';
import { table } from './table.js';

type Unit = ProfileDocument['unit'];

/** What stands under a figure: rotamers, barriers, processes, cautions. */
export function shortTables(document: ProfileDocument, { electronic, freeEnergy, notes }: DocumentAnalysis, unit: Unit): string {
  const best = freeEnergy ?? electronic;
  return [...firstTables(document, electronic, best, unit), cautionLines([...notes, ...best.cautions])].join('\n');
}

/** Everything, every temperature. */
export function analysisTables(
  document: ProfileDocument,
  { electronic, freeEnergy, wells, hinderedRotor, noHinderedRotor, notes }: DocumentAnalysis,
  unit: Unit,
): string {
  const best = freeEnergy ?? electronic;
  return [
    ...firstTables(document, electronic, best, unit),
    ...(best.rows.length > 1 ? [populationTable(best)] : []),
    rateTable(best),
    ...(wells ? [wellTable(best, wells)] : []),
    ...(hinderedRotor ? [rotorTables(hinderedRotor)] : []),
    ...(noHinderedRotor ? [`${noHinderedRotor.message}\n`] : []),
    ...(best.rotamerCouplings ? [couplingTable(best)] : []),
    cautionLines([...notes, ...best.cautions, ...(hinderedRotor?.notes ?? [])]),
  ].join('\n');
}

function firstTables(document: ProfileDocument, electronic: ProfileAnalysis, best: ProfileAnalysis, unit: Unit): string[] {
  const free = best !== electronic;
  return [
    rotamerTable(best, unit),
    barrierTable(document, electronic, unit),
    ...best.rows.map(({ temperature, processes }) => processTable(processes, temperature, free)),
  ];
}

function rotamerTable({ rotamers, rows }: ProfileAnalysis, unit: Unit): string {
  const [{ temperature, populations }] = rows;
  const free = populations.byFreeEnergy;
  const relations = rotamers.map((_, i) => relationInWords(rotamers, i));
  const related = relations.some((words) => words !== '');
  const columns = [
    'rotamer',
    'angle (deg)',
    `energy (${unit})`,
    `% at ${temperature} K by energy`,
    'by profile',
    ...(free ? ['by free energy'] : []),
    ...(related ? ['relation'] : []),
  ];
  return table(
    columns,
    rotamers.map(({ label, angle, energy }, i) => [
      label,
      shownAngle(angle),
      (energy * perKcal(unit)).toFixed(2),
      ...[populations.byEnergy, populations.byProfile, ...(free ? [free] : [])].map((shares) => (100 * shares[i]).toFixed(1)),
      ...(related ? [relations[i]] : []),
    ]),
  );
}

/** Which other wells are the same molecule, and which its mirror image; a well that is both has no hand. */
function relationInWords(rotamers: ProfileAnalysis['rotamers'], i: number): string {
  const { identical, mirrorImages } = rotamers[i];
  const at = (wells: readonly number[]): string => wells.map((j) => shownAngle(rotamers[j].angle)).join(', ');
  const mirrored = mirrorImages.filter((j) => j !== i && !identical.includes(j));
  const handed = mirrored.length > 0 && !mirrorImages.includes(i);
  return [...(identical.length > 0 ? [`the same as ${at(identical)}`] : []), ...(handed ? [`enantiomer of ${at(mirrored)}`] : [])].join(
    ', ',
  );
}

/** Populations at every temperature, in percent: by free energy where it is known, else by the energies of the wells. */
function populationTable({ rotamers, rows }: ProfileAnalysis): string {
  const [{ populations }] = rows;
  return table(
    [
      `T (K), by ${populations.byFreeEnergy ? 'free ' : ''}energy`,
      ...rotamers.map(({ label, angle }) => `% ${label} ${shownAngle(angle)}`),
    ],
    rows.map(({ temperature, populations: { byFreeEnergy, byEnergy } }) => [
      `${temperature}`,
      ...(byFreeEnergy ?? byEnergy).map((share) => (100 * share).toFixed(1)),
    ]),
  );
}

/** Rates over each barrier, both ways, at every temperature. */
function rateTable({ rotamers, barriers, rows }: ProfileAnalysis): string {
  return table(
    ['T (K)', 'barrier (deg)', 'from', 'to', 'k (1/s)', 'k back (1/s)'],
    rows.flatMap(({ temperature, barrierRates }) =>
      barrierRates.map((rates, i) => {
        const [from, to] = barriers[i].wells.map((well) => rotamers[well].label);
        return [
          `${temperature}`,
          shownAngle(barriers[i].angle),
          from,
          to,
          rates ? rates.forward.toExponential(2) : 'no rate',
          rates ? rates.backward.toExponential(2) : '',
        ];
      }),
    ),
  );
}

/** Each well as an ideal gas at 1 bar. */
function wellTable({ rotamers }: ProfileAnalysis, wells: readonly (WellThermodynamics | null)[]): string {
  return table(
    ['T (K)', 'well by vibrations', 'sigma', 'zero point (kcal/mol)', 'H-H0 (kcal/mol)', 'S (J/mol/K)', 'Cp (J/mol/K)'],
    wells.flatMap((well, i) =>
      well
        ? well.rows.map(({ temperature, zeroPoint, enthalpy, entropy, heatCapacity }) => [
            `${temperature}`,
            `${rotamers[i].label} ${shownAngle(rotamers[i].angle)}`,
            `${well.symmetryNumber}`,
            zeroPoint.toFixed(3),
            enthalpy.toFixed(3),
            entropy.toFixed(2),
            heatCapacity.toFixed(2),
          ])
        : [],
    ),
  );
}

/** Levels in the list and states in the table below it. */
const MOST_LEVELS = 12;
const MOST_STATES = 8;

function rotorTables({
  momentKind,
  momentsAtWell,
  symmetryNumber,
  zeroPoint,
  fundamental,
  splitting,
  transitions,
  states,
  rows,
}: ProfileRotorResult): string {
  const { rigid, path, eastRadom, pitzerGwinn } = momentsAtWell;
  const moments = [
    `rigid ${rigid.toFixed(2)}`,
    `relaxed path ${path.toFixed(2)}`,
    `I(2,3) ${eastRadom.toFixed(2)}`,
    ...(pitzerGwinn === null ? [] : [`symmetric top ${pitzerGwinn.toFixed(2)}`]),
  ].join(', ');
  const heading = [
    `hindered rotor: reduced moment in the lowest well ${moments} amu angstrom^2 (levels by ${momentKind}), symmetry number ${symmetryNumber}`,
    `  zero point ${zeroPoint.toFixed(1)} cm-1, fundamental ${fundamental === null ? 'not told from the levels' : `${fundamental.toFixed(1)} cm-1`}, tunnelling splitting ${splitting === null ? (states.length > 0 ? 'none (no equal well)' : 'not told from the levels') : shownSplitting(splitting)} (cm-1)`,
  ].join('\n');
  const list = `  levels above the lowest (cm-1): ${transitions
    .slice(0, MOST_LEVELS)
    .map((energy) => energy.toFixed(2))
    .join(', ')} ...\n`;
  const levels =
    states.length === 0
      ? ''
      : table(
          ['v', 'wells (deg)', 'above the lowest (cm-1)', 'splitting (cm-1)'],
          states
            .slice(0, MOST_STATES)
            .map(({ quantumNumber, wells, energy, splitting: split }) => [
              `${quantumNumber}`,
              wells.map((phi) => shownAngle(degrees(phi))).join(', '),
              (energy - states[0].energy).toFixed(2),
              wells.length > 1 ? shownSplitting(split) : '',
            ]),
        );
  const functions = table(
    ['T (K)', 'values', 'Q', 'S (J/mol/K)', 'Cp (J/mol/K)', 'H-H0 (kcal/mol)'],
    rows.flatMap(({ temperature, quantum, harmonic, classical, pitzerGwinn: corrected }) =>
      (
        [
          ['quantum', quantum],
          ['harmonic', harmonic],
          ['classical', classical],
          ['Pitzer-Gwinn', corrected],
        ] as const
      ).flatMap(([name, values]) =>
        values
          ? [
              [
                `${temperature}`,
                name,
                values.partitionFunction.toPrecision(5),
                values.entropy.toFixed(2),
                values.heatCapacity.toFixed(2),
                values.enthalpy.toFixed(3),
              ],
            ]
          : [],
      ),
    ),
  );
  return `${heading}\n${list}${levels}\n${functions}  classical H-H0 counts from the bottom of the potential, the others from the lowest level\n`;
}

function shownSplitting(value: number): string {
  if (value === 0) return 'below rounding';
  return value >= 0.001 ? value.toFixed(3) : value.toExponential(1);
}

function barrierTable(document: ProfileDocument, { barriers, rotamers }: ProfileAnalysis, unit: Unit): string {
  const other = unit === 'kcal/mol' ? 'kJ/mol' : 'kcal/mol';
  const shown = (energy: number, in_: Unit): string => (energy * perKcal(in_)).toFixed(2);
  return table(
    ['barrier between', 'angle (deg)', 'profile', `height (${unit})`, `(${other})`, 'proof'],
    barriers.map(({ wells, angle, kind, energy, saddle, stationaryPoint }) => [
      `${rotamers[wells[0]].label} and ${rotamers[wells[1]].label}`,
      shownAngle(angle),
      kind,
      shown(saddle ?? energy, unit),
      shown(saddle ?? energy, other),
      proofInWords(document.proved?.find(({ of }) => of === stationaryPoint)),
    ]),
  );
}

function proofInWords(point: ProfileProvedPoint | undefined): string {
  if (!point) return 'not proved';
  if (point.verdict !== 'saddle') return `no saddle between them: ${point.verdict}`;
  const motion =
    point.motion?.kind === 'inversion'
      ? `inversion at ${point.motion.atoms.join()}`
      : point.motion?.kind === 'other rotor'
        ? `turn about ${point.motion.atoms.join('-')}`
        : 'this rotor';
  const detour = point.links > 1 ? `, highest of ${point.links} saddles` : '';
  const inverting =
    point.inverts.length > 0
      ? `, ${point.inverts.length === 1 ? 'nitrogen' : 'nitrogens'} ${point.inverts.join(', ')} turned inside out`
      : '';
  return `saddle at ${shownAngle(point.angle)}, ${motion}${inverting}, overlap ${(point.overlap ?? 0).toFixed(2)}, ${(-point.frequencies[0]).toFixed(0)}i cm-1${detour}`;
}

function processTable(processes: readonly AnalysedProcess[], temperature: number, free: boolean): string {
  const heading = `${temperature} K (${(temperature - 273.15).toFixed(0)} C), rates from ${free ? 'free energies with tunnelling' : 'electronic energies'}, ranges from the assumed error of the barrier\n`;
  if (processes.length === 0) return `${heading}  no process between different rotamers\n`;
  const coalescing = processes.some(({ coalescenceTemperature }) => coalescenceTemperature);
  return (
    heading +
    table(
      [
        'process',
        'kind',
        'barrier (kcal/mol)',
        '(kJ/mol)',
        'k (1/s)',
        'half-life (range)',
        '100 to 99 % ee',
        'class',
        ...(coalescing ? ['coalescence (K)'] : []),
      ],
      processes.map((process) => {
        const { barrier, forward, stabilityClass: sorted } = process;
        const time = process.racemisationHalfLife ?? process.exchangeHalfLife;
        return [
          process.label,
          process.kind,
          barrier === null ? '' : barrier.toFixed(2),
          barrier === null ? '' : (barrier * perKcal('kJ/mol')).toFixed(1),
          forward ? forward.value.toExponential(2) : 'no rate',
          time ? timeInWords(time) : '',
          process.timeTo99Percent ? durationInWords(process.timeTo99Percent.value) : '',
          sorted
            ? `${sorted.class}${sorted.low === sorted.high ? '' : ` (${sorted.low} to ${sorted.high})`}${process.oki ? `, ${process.oki}` : ''}`
            : '',
          ...(coalescing ? [process.coalescenceTemperature ? process.coalescenceTemperature.value.toFixed(1) : ''] : []),
        ];
      }),
    ) +
    processes.flatMap(({ label, refused }) => refused.map(({ message }) => `  ${label}: ${message}\n`)).join('')
  );
}

function timeInWords({ value, low, high }: Range): string {
  return `${durationInWords(value)} (${durationInWords(low)} to ${durationInWords(high)})`;
}

function couplingTable({ rotamers, rotamerCouplings, rows }: ProfileAnalysis): string {
  const [{ couplings, temperature }] = rows;
  if (!rotamerCouplings || !couplings) return '';
  return table(
    ['3J(H,H) (Hz)', ...rotamers.map(({ label, angle }) => `${label} ${shownAngle(angle)}`), `averaged at ${temperature} K`],
    couplings.map(({ protons, coupling }, n) => [
      protons.map((side) => side.join('/')).join(' '),
      ...rotamerCouplings.map((row) => row[n].coupling.toFixed(1)),
      coupling.toFixed(1),
    ]),
  );
}

/** Cautions, each once. */
export function cautionLines(notes: readonly { readonly message: string }[]): string {
  return [...new Set(notes.map(({ message }) => `caution: ${message}\n`))].join('');
}
