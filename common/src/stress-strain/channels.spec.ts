import type { StressStrainRecord } from '../contract/runs';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { readChannels, type RawChannel } from './channels';

const record: StressStrainRecord = { kind: 'stress-strain', axialGaugeLength: 0.05, transverseGaugeLength: 0.0125, compressive: false };
const AREA = 1e-4;
const raw = (channel: RawChannel['channel'], unit: string, values: number[], sign: 1 | -1 = 1): RawChannel => ({ channel, unit, sign, values: Float64Array.from(values) });
const force = raw('force', 'kN', [0, 1, 2]);
const axial = raw('axial1', 'mm', [0, 0.01, 0.02]);

function refusal(action: () => unknown): string[] {
  try {
    action();
  } catch (error) {
    if (error instanceof EvaluationRefused) return error.findings.map((f) => f.code);
    throw error;
  }
  return [];
}

const closeTo = (values: Float64Array, expected: number[]) => {
  expect(values).toHaveLength(expected.length);
  expected.forEach((v, i) => expect(values[i]).toBeCloseTo(v, 12));
};

describe('readChannels', () => {
  it('turns force over area into stress and extension over gauge length into strain', () => {
    const { stress, stressFrom, axial: strain } = readChannels([force, axial], record, AREA);
    closeTo(stress.map((v) => v / 1e6), [0, 10, 20]);
    closeTo(strain.mean, [0, 2e-4, 4e-4]);
    expect([stressFrom, strain.extension]).toEqual(['force', true]);
  });

  it.each([
    ['psi', 1000, 6894757.293168361], ['kip', 1, 4448.2216152605],
  ])('reads %s', (unit, value, si) => {
    const { stress } = unit === 'psi' ? readChannels([raw('stress', unit, [0, value]), raw('axial1', '%', [0, 0.1])], record, null) : readChannels([raw('force', unit, [0, value]), raw('axial1', '%', [0, 0.1])], record, 1);
    expect(stress[1]! / si - 1).toBeCloseTo(0, 12);
  });

  it('averages two sensors of one direction and keeps both', () => {
    const { axial: strain, transverse } = readChannels([force, raw('axial1', 'µε', [0, 90, 180]), raw('axial2', 'µε', [0, 110, 220]), raw('transverse1', 'mm', [0, 1e-3, 2e-3], -1)], record, AREA);
    closeTo(strain.mean, [0, 100e-6, 200e-6]);
    closeTo(strain.pair![1], [0, 110e-6, 220e-6]);
    closeTo(transverse!.mean, [0, -8e-5, -16e-5]);
    expect(strain.extension).toBe(false);
  });

  it('prefers force where the area is known, and takes stress where it is not', () => {
    const stress = raw('stress', 'MPa', [0, 11, 22]);
    expect(readChannels([force, stress, axial], record, AREA).stressFrom).toBe('force');
    expect(readChannels([force, stress, axial], record, null).stressFrom).toBe('stress');
  });

  it('leaves out rows with unreadable cells and keeps the file rows of the others', () => {
    const { rows, stress, findings } = readChannels([raw('force', 'kN', [0, 1, Number.NaN, 3]), raw('axial1', 'mm', [0, 1, 2, 3])], record, AREA);
    expect([...rows]).toEqual([0, 1, 3]);
    expect(stress[2]! / 1e6).toBeCloseTo(30, 9);
    expect(findings.map((f) => f.code)).toEqual(['ROWS_SKIPPED']);
  });

  it('turns all channels of a record that counts compression negative', () => {
    const { stress, axial: strain, transverse, findings } = readChannels([raw('force', 'kN', [0, -1, -2]), raw('axial1', 'µε', [0, -100, -200]), raw('transverse1', 'µε', [0, 30, 60])], record, AREA);
    closeTo(stress.map((v) => v / 1e6), [0, 10, 20]);
    closeTo(strain.mean, [0, 100e-6, 200e-6]);
    closeTo(transverse!.mean, [0, -30e-6, -60e-6]);
    expect(findings[0]).toMatchObject({ code: 'SIGNS_TURNED', seen: expect.stringContaining('not marked as compression') });
    expect(findings).toHaveLength(1);
  });

  it.each([
    ['AREA_MISSING', [force, axial], record, null],
    ['CHANNEL_MISSING', [axial], record, AREA],
    ['CHANNEL_MISSING', [force], record, AREA],
    ['GAUGE_LENGTH_MISSING', [force, axial], { ...record, axialGaugeLength: null }, AREA],
    ['UNIT_UNSUITABLE', [raw('force', 'mm', [0, 1]), axial], record, AREA],
    ['UNIT_UNSUITABLE', [force, raw('axial1', 'furlong', [0, 1, 2])], record, AREA],
    ['RECORD_MISSING', [raw('force', 'kN', []), raw('axial1', 'mm', [])], record, AREA],
    ['RECORD_MISSING', [raw('force', 'kN', [Number.NaN, 1]), raw('axial1', 'mm', [0, 1])], record, AREA],
  ] as const)('refuses with %s', (code, channels, run, area) => {
    expect(refusal(() => readChannels(channels, run, area))).toEqual([code]);
  });
});
