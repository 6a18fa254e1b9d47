import type { ReadingQuantity, Shape } from '../contract/vocabulary';
import { firstOrder } from '../uncertainty/first-order';
import { Model } from '../uncertainty/model';
import type { InstrumentState } from './instrument-state';
import { measureSpecimen, type ReadingState } from './measure-specimen';

const instrument = (id: string, change: Partial<InstrumentState> = {}, calibration: Partial<NonNullable<InstrumentState['calibration']>> = {}): InstrumentState => ({
  id, name: id, resolution: 0, rangeLow: null, rangeHigh: null, calibration: { calibratedOn: '2025-01-10', dueOn: '2026-01-09', expandedUncertainty: 2e-5, relative: false, coverageFactor: 2, correction: 0, ...calibration }, ...change,
});
const caliper = instrument('caliper');
const balance = instrument('balance');
const thermometer = instrument('thermometer', {}, { expandedUncertainty: 0.2 });

let count = 0;
function read(quantity: ReadingQuantity, values: readonly number[], by: InstrumentState = caliper, readAt = '2025-06-02T08:00:00Z'): ReadingState[] {
  return values.map((value, i) => ({ id: `${(count += 1)}`, quantity, station: i + 1, value, readAt, instrument: by }));
}
const measure = (shape: Shape, readings: readonly ReadingState[], materialClass: 'rock' | 'metal' = 'rock') => measureSpecimen(new Model(), shape, materialClass, readings);
const u = (term: Parameters<typeof firstOrder>[0] | null) => (term === null ? Number.NaN : firstOrder(term).standardUncertainty);
const codes = (readings: readonly ReadingState[], shape: Shape = 'cube') => measure(shape, readings).findings.map((f) => f.code);

const CUBE = [...read('length', [0.05, 0.05, 0.05]), ...read('width', [0.05, 0.05, 0.05]), ...read('thickness', [0.05, 0.05, 0.05])];
const STONE = [...CUBE, ...read('mass', [0.33], balance)];

describe('measureSpecimen', () => {
  it.each<[Shape, ReadingState[], number, number]>([
    ['cylinder', [...read('length', [0.1]), ...read('diameter', [0.05])], Math.PI * 0.025 ** 2, Math.PI * 0.025 ** 2 * 0.1],
    ['prism', [...read('length', [0.16]), ...read('width', [0.04]), ...read('thickness', [0.03])], 0.0012, 0.000192],
    ['plate', [...read('length', [0.2]), ...read('width', [0.05]), ...read('thickness', [0.004])], 0.0002, 0.00004],
    ['cube', [...read('length', [0.1]), ...read('width', [0.1]), ...read('thickness', [0.1])], 0.01, 0.001],
  ])('%s: cross-section and volume', (shape, readings, area, volume) => {
    const found = measure(shape, readings);
    expect(found.area!.value).toBeCloseTo(area, 15);
    expect(found.volume!.value).toBeCloseTo(volume, 15);
  });

  it('keeps statistics by quantity', () => {
    const [length] = measure('cylinder', read('length', [0.1001, 0.1, 0.0999])).statistics;
    expect(length).toMatchObject({ quantity: 'length', n: 3, unit: 'm' });
    expect(length!.mean).toBeCloseTo(0.1, 12);
    expect(length!.standardDeviation).toBeCloseTo(0.0001, 12);
    expect(length!.range).toBeCloseTo(0.0002, 12);
    expect(length!.standardUncertainty).toBeCloseTo(Math.hypot(1e-5, 0.0001 / Math.sqrt(3)), 12);
  });

  it('averages the spread over readings, but neither calibration nor resolution', () => {
    const by = instrument('caliper', { resolution: 1e-4 });
    const of = (n: number) => measure('cylinder', read('length', Array.from({ length: n }, (_, i) => 0.1 + (i % 2 === 0 ? 1e-4 : -1e-4)), by)).length;
    const spread = (n: number) => Math.sqrt(n / (n - 1)) * 1e-4 / Math.sqrt(n);
    for (const n of [2, 10, 100]) expect(u(of(n))).toBeCloseTo(Math.sqrt(1e-5 ** 2 + 1e-4 ** 2 / 12 + spread(n) ** 2), 12);
  });

  it('one reading has only type B, and a note says so', () => {
    const found = measure('cylinder', read('length', [0.1]));
    expect(u(found.length)).toBeCloseTo(1e-5, 15);
    expect(firstOrder(found.length!).degreesOfFreedom).toBe(Infinity);
    expect(found.findings.map((f) => `${f.code} ${f.severity}`)).toContain('READINGS_FEW note');
  });

  it('applies the calibration’s correction, absolute or relative', () => {
    expect(measure('cylinder', read('length', [0.1], instrument('a', {}, { correction: 3e-5 }))).length!.value).toBeCloseTo(0.10003, 15);
    expect(measure('cylinder', read('length', [0.1], instrument('b', {}, { correction: 0.002, relative: true }))).length!.value).toBeCloseTo(0.1002, 15);
  });

  it('one caliper on all sides of a cube errs on all alike: u(V)/V is three times u(L)/L, and calipers of their own √3 times', () => {
    const relative = (readings: ReadingState[]) => {
      const { volume } = measure('cube', readings);
      return u(volume) / volume!.value;
    };
    const side = (quantity: ReadingQuantity, id: string) => read(quantity, [0.05], instrument(id));
    expect(relative([...side('length', 'a'), ...side('width', 'a'), ...side('thickness', 'a')])).toBeCloseTo((3 * 1e-5) / 0.05, 12);
    expect(relative([...side('length', 'a'), ...side('width', 'b'), ...side('thickness', 'c')])).toBeCloseTo((Math.sqrt(3) * 1e-5) / 0.05, 12);
  });

  it('of two densities takes the one with the smaller uncertainty', () => {
    const water = [...read('massInWater', [0.20532], balance), ...read('waterTemperature', [293.15], thermometer)];
    const found = measure('cube', [...STONE, ...water]);
    expect(found.densityByDimensions!.value).toBeCloseTo(2640, 9);
    expect(Math.abs(found.densityInWater!.value - 2640)).toBeLessThan(1);
    expect(found.density).toBe(found.densityInWater);
    const coarse = measure('cube', [...STONE, ...water.map((r) => ({ ...r, instrument: instrument('coarse', {}, { expandedUncertainty: 0.02 }) }))]);
    expect(coarse.density).toBe(coarse.densityByDimensions);
  });

  it('without readings there is nothing, and it says what is missing', () => {
    const found = measure('cube', []);
    expect([found.length, found.area, found.volume, found.density]).toEqual([null, null, null, null]);
    expect(found.findings).toMatchObject([{ code: 'READINGS_MISSING', severity: 'stop', subject: 'length, width, thickness' }]);
  });

  it.each([0, -0.33])('gives no density for a mass of %d kg', (mass) => {
    const found = measure('cube', [...CUBE, ...read('mass', [mass], balance)]);
    expect(found.density).toBeNull();
    expect(found.findings.map((f) => f.code)).toContain('READING_NOT_POSITIVE');
  });
});

describe('findings of readings', () => {
  it('a sound stone has none', () => {
    expect(codes(STONE)).toEqual([]);
  });

  it.each([[10, 0.5], [25.4, 1.27]])('a station %d times another looks like another unit', (_, value) => {
    expect(codes([...STONE, ...read('length', [value])])).toContain('UNIT_SUSPECT');
  });

  it('a mass in the wrong unit shows in the density', () => {
    const found = codes([...CUBE, ...read('mass', [0.00033], balance)]);
    expect(found).toContain('DENSITY_OUTSIDE_CLASS');
    expect(found).toContain('UNIT_SUSPECT');
  });

  it('a density outside its class is told, one inside not', () => {
    expect(measure('cube', STONE, 'metal').findings.map((f) => f.code)).toEqual([]);
    expect(codes([...CUBE, ...read('mass', [0.66], balance)])).toContain('DENSITY_OUTSIDE_CLASS');
  });

  it('densities that disagree', () => {
    const water = (kg: number) => [...read('massInWater', [kg], balance), ...read('waterTemperature', [293.15], thermometer)];
    expect(codes([...STONE, ...water(0.20532)])).not.toContain('DENSITIES_DISAGREE');
    expect(codes([...STONE, ...water(0.21)])).toContain('DENSITIES_DISAGREE');
  });

  it('a weighing that cannot be', () => {
    expect(codes([...STONE, ...read('massInWater', [0.4], balance), ...read('waterTemperature', [293.15], thermometer)])).toContain('WEIGHING_IMPOSSIBLE');
    expect(codes([...STONE, ...read('massInWater', [0.2], balance), ...read('waterTemperature', [20], thermometer)])).toContain('WEIGHING_IMPOSSIBLE');
  });

  it('an outlier among stations, but not a step of the instrument', () => {
    const fine = instrument('caliper', { resolution: 1e-5 });
    const sides = (values: readonly number[]) => [...STONE.filter((r) => r.quantity !== 'length'), ...read('length', values, fine)];
    expect(codes(sides([0.05, 0.05001, 0.05002, 0.04999, 0.05001, 0.0512]))).toContain('REPLICATE_OUTLIER');
    expect(codes(sides([0.05, 0.05, 0.05, 0.05, 0.05, 0.05001]))).not.toContain('REPLICATE_OUTLIER');
  });

  it('stations that scatter widely', () => {
    expect(codes([...STONE.filter((r) => r.quantity !== 'length'), ...read('length', [0.049, 0.05, 0.0515])])).toContain('NOT_UNIFORM');
  });

  it('the instrument on the day of the reading, and its range', () => {
    const mass = (by: InstrumentState, readAt?: string) => codes([...CUBE, ...read('mass', [0.33], by, readAt)]);
    expect(mass(balance, '2026-01-09T08:00:00Z')).not.toContain('OUT_OF_CALIBRATION');
    expect(mass(balance, '2026-01-10T08:00:00Z')).toContain('OUT_OF_CALIBRATION');
    expect(mass({ ...balance, calibration: null })).toContain('CALIBRATION_MISSING');
    expect(mass(instrument('balance', { rangeHigh: 0.32 }))).toContain('OUTSIDE_CALIBRATED_RANGE');
    expect(mass(instrument('balance', { rangeLow: 0.34 }))).toContain('OUTSIDE_CALIBRATED_RANGE');
  });
});
