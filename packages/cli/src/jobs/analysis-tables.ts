/** An analysis as tables for people: rotamers and populations, barriers and what was proved of them, processes at each temperature, cautions. */
import { type AnalysedProcess, durationInWords, type ProfileAnalysis, type Range } from '@tordial/analysis';
import type { ProfileDocument, ProfileProvedPoint } from '@tordial/scan';
import type { DocumentAnalysis } from '../profile-analysis.js';
import { unitFactor } from './potential.js';
import { table } from './table.js';

type Unit = ProfileDocument['unit'];

/** Everything, every temperature. */
export function analysisTables(document: ProfileDocument, { electronic, freeEnergy, notes }: DocumentAnalysis, unit: Unit): string {
  const best = freeEnergy ?? electronic;
  return [
    rotamerTable(best, unit),
    barrierTable(document, electronic, unit),
    ...best.rows.map(({ temperature, processes }) => processTable(processes, temperature, freeEnergy !== null)),
    ...(best.rotamerCouplings ? [couplingTable(best)] : []),
    cautionLines([...notes, ...best.cautions]),
  ].join('\n');
}

function rotamerTable({ rotamers, rows }: ProfileAnalysis, unit: Unit): string {
  const [{ temperature, populations }] = rows;
  const free = populations.byFreeEnergy;
  const columns = [
    'rotamer',
    'angle (deg)',
    `energy (${unit})`,
    `% at ${temperature} K by energy`,
    'by profile',
    ...(free ? ['by free energy'] : []),
  ];
  return table(
    columns,
    rotamers.map(({ label, angle, energy }, i) => [
      label,
      angle.toFixed(1),
      (energy * unitFactor(unit)).toFixed(2),
      ...[populations.byEnergy, populations.byProfile, ...(free ? [free] : [])].map((shares) => (100 * shares[i]).toFixed(1)),
    ]),
  );
}

function barrierTable(document: ProfileDocument, { barriers, rotamers }: ProfileAnalysis, unit: Unit): string {
  const other = unit === 'kcal/mol' ? 'kJ/mol' : 'kcal/mol';
  const shown = (energy: number, in_: Unit): string => (energy * unitFactor(in_)).toFixed(2);
  return table(
    ['barrier between', 'angle (deg)', 'profile', `height (${unit})`, `(${other})`, 'proof'],
    barriers.map(({ wells, angle, kind, energy, saddle, stationaryPoint }) => [
      `${rotamers[wells[0]].label} and ${rotamers[wells[1]].label}`,
      angle.toFixed(1),
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
  return `saddle at ${point.angle.toFixed(1)}, ${motion}, overlap ${(point.overlap ?? 0).toFixed(2)}, ${(-point.frequencies[0]).toFixed(0)}i cm-1${detour}`;
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
          barrier === null ? '' : (barrier * unitFactor('kJ/mol')).toFixed(1),
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
    ['3J(H,H) (Hz)', ...rotamers.map(({ label, angle }) => `${label} ${angle.toFixed(0)}`), `averaged at ${temperature} K`],
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
