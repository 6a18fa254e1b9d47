/** samples/README.md: what each file is, the truth behind it, and what a person types to use it. */
import type { RunRecord } from '@strainwright/common/contract/runs';
import { INSTRUMENTS, SAMPLE_RUNS, ZERO, type SampleRun } from './truths';

const mm = (metres: number) => `${(metres * 1e3).toFixed(2)} mm`;
const gpa = (pascals: number) => (pascals / 1e9).toFixed(2);

function specimen({ shape, sizes, density }: SampleRun): string {
  const { length = 0, diameter, width = 0, thickness = 0 } = sizes;
  const volume = length * (diameter === undefined ? width * thickness : (Math.PI / 4) * diameter ** 2);
  return [shape, ...Object.entries(sizes).map(([quantity, value]) => `${quantity} ${mm(value)}`), ...(density === undefined ? [] : [`mass ${(density * volume * 1e3).toFixed(2)} g`])].join(', ');
}

function context(record: RunRecord): string {
  if (record.kind === 'pulse') return `pulse, ${(record.frequency ?? 0) / 1e6} MHz`;
  const gauge = (name: string, length: number | null) => (length === null ? [] : [`${name} gauge length ${mm(length)}`]);
  return [record.compressive ? 'compression' : 'tension', ...gauge('axial', record.axialGaugeLength), ...gauge('transverse', record.transverseGaugeLength)].join(', ');
}

const percent = (instrument: (typeof INSTRUMENTS)['force']) => `${(instrument.calibration?.expandedUncertainty ?? 0) * 100} %`;
const micrometres = (instrument: (typeof INSTRUMENTS)['force']) => `${(instrument.calibration?.expandedUncertainty ?? 0) * 1e6}`;

export function readme(): string {
  const runs = SAMPLE_RUNS.map((run) => {
    const { E, nu } = run.truth;
    return `| ${run.files.map((f) => f.name).join(', ')} | ${run.title} | ${specimen(run)} | ${context(run.record)} | ${gpa(E)} | ${nu} | ${gpa(E / (2 * (1 + nu)))} | ${gpa(E / (3 * (1 - 2 * nu)))} |`;
  });
  const files = SAMPLE_RUNS.flatMap((run) => run.files.map((f) => `| ${f.name} | ${f.purpose} | ${f.oddity}${f.asks === true ? '; the program asks' : ''} |`));
  return [
    '# Samples', 'Raw files to try by hand, in the layouts that test frames and pulse units write. All are made by `npm run samples` (test/samples) from the constants in', 'the first table; materials and machines are invented. `npm test` checks that each is proposed with the right layout unasked and that its constants cover the truth.', '',
    '| files | what | specimen | run | E, GPa | ν | G, GPa | K, GPa |', '|---|---|---|---|---|---|---|---|', ...runs, '',
    `Zero times of the pulse unit, face to face: P ${(ZERO.P * 1e6).toFixed(3)} µs, S ${(ZERO.S * 1e6).toFixed(3)} µs, each within 1 ns. Expanded uncertainties (k = 2) of the instruments, inside which their errors were drawn:`,
    `force ${percent(INSTRUMENTS.force)}, axial strain or extension ${percent(INSTRUMENTS.axial)}, transverse ${percent(INSTRUMENTS.transverse)}; caliper ${micrometres(INSTRUMENTS.caliper)} µm; balance 0.02 g; time base ${percent(INSTRUMENTS.pulse)}.`, '',
    '| file | purpose | layout |', '|---|---|---|', ...files, '',
  ].join('\n');
}
