import { EvaluationRefused } from '../findings/evaluation-refused';
import { firstOrder } from '../uncertainty/first-order';
import { Model } from '../uncertainty/model';
import type { WaveArrivals } from './arrivals';
import { timeTerm } from './time-term';
import { transitTime } from './transit-time';
import { zeroTerms } from './zero-time';

const nonePicked: WaveArrivals = { picks: [], times: [], pickUncertainty: 0, latePerShape: 0, hiddenHalfWidth: 0, handHalfWidth: 0, findings: [] };
const picked = (times: readonly number[], latePerShape: number): WaveArrivals => ({ ...nonePicked, times, pickUncertainty: 1e-9, latePerShape });
const u = (term: Parameters<typeof firstOrder>[0]) => firstOrder(term).standardUncertainty;

describe('zeroTerms', () => {
  it('face to face: the mean, its scatter and the resolution', () => {
    const model = new Model();
    const zero = zeroTerms(model, 'P', { by: 'face to face', readings: [1e-6, 1.2e-6, 1.1e-6] }, nonePicked, 1e-8);
    expect(zero?.read.value).toBeCloseTo(1.1e-6, 15);
    expect(u(zero!.read)).toBeCloseTo(Math.hypot(0.1e-6 / Math.sqrt(3), 1e-8 / Math.sqrt(12)), 15);
    expect(zero?.known).toBeNull();
  });

  it('reference bar: the known time stands apart from what was read', () => {
    const zero = zeroTerms(new Model(), 'S', { by: 'reference bar', readings: [26.4e-6], knownTime: 25.4e-6, knownTimeUncertainty: 2e-8 }, nonePicked, 0);
    expect(zero?.read.value).toBe(26.4e-6);
    expect(zero?.known?.value).toBe(25.4e-6);
    expect(u(zero!.known!)).toBe(2e-8);
  });

  // O05's kind of case, in closed form: t = 2 + 3 L with residuals +r, −2r, +r at L = 1, 2, 3 leaves the slope, s² = 6r², u(a) = s√(1/3 + 4/2).
  it('several lengths: the intercept with the uncertainty that the slope leaves it', () => {
    const r = 0.01;
    const points = [{ length: 1, time: 5 + r }, { length: 2, time: 8 - 2 * r }, { length: 3, time: 11 + r }];
    const zero = zeroTerms(new Model(), 'P', { by: 'several lengths', points }, nonePicked, 0);
    expect(zero?.read.value).toBeCloseTo(2, 12);
    expect(u(zero!.read)).toBeCloseTo(Math.sqrt(6) * r * Math.sqrt(1 / 3 + 2), 12);
    expect(firstOrder(zero!.read).degreesOfFreedom).toBe(1);
  });

  it('refuses lengths that are all alike', () => {
    const points = [1, 2, 3].map((time) => ({ length: 0.1, time }));
    expect(() => zeroTerms(new Model(), 'P', { by: 'several lengths', points }, nonePicked, 0)).toThrow(EvaluationRefused);
  });

  it('takes picks in place of typed readings, and keeps a bar’s known time', () => {
    const bar = { by: 'reference bar' as const, readings: [1], knownTime: 25.4e-6, knownTimeUncertainty: 1e-8 };
    const zero = zeroTerms(new Model(), 'P', bar, picked([26e-6], 0), 0);
    expect(zero?.read.value).toBe(26e-6);
    expect(zero?.known?.value).toBe(25.4e-6);
    expect(zeroTerms(new Model(), 'P', null, nonePicked, 0)).toBeNull();
  });
});

describe('transitTime', () => {
  const at = (model: Model, key: string, value: number, standardUncertainty: number) => model.input({ key, label: key, unit: 's', value, standardUncertainty, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: '' });

  it('ten readings do not average the zero time’s uncertainty away', () => {
    const model = new Model();
    const read = timeTerm(model, { key: 'time.P', label: 'P', values: new Array<number>(10).fill(9e-6), resolution: 0, picked: null });
    const zero = { read: at(model, 'zero', 1e-6, 2e-8), known: null };
    expect(u(transitTime(read, zero, null))).toBeCloseTo(2e-8, 15);
  });

  it('calibrates what was read, not what is known', () => {
    const model = new Model();
    const zero = { read: model.constant(26e-6), known: model.constant(25e-6) };
    const base = { term: at(model, 'c', 0.01, 1e-3), relative: true };
    expect(transitTime(model.constant(36e-6), zero, base).value).toBeCloseTo(10e-6 * 1.01 + 25e-6, 15);
  });

  it('an absolute calibration adds its uncertainty once, and no correction', () => {
    const model = new Model();
    const term = transitTime(model.constant(9e-6), { read: model.constant(1e-6), known: null }, { term: at(model, 'c', 5e-7, 3e-8), relative: false });
    expect(term.value).toBeCloseTo(8e-6, 15);
    expect(u(term)).toBeCloseTo(3e-8, 15);
  });

  it('the onset’s shape cancels where zero time and arrival are picked alike', () => {
    const shapeShare = (late: number) => {
      const model = new Model();
      const read = timeTerm(model, { key: 'time.P', label: 'P', values: [9e-6], resolution: 0, picked: picked([9e-6], 3e-8) });
      const zero = late === 0 ? { read: model.constant(1e-6), known: null } : zeroTerms(model, 'P', null, picked([1e-6], late), 0);
      const first = firstOrder(transitTime(read, zero, null));
      return Math.abs(first.sensitivities[model.inputs.findIndex((i) => i.key === 'onset')] ?? Number.NaN);
    };
    expect(shapeShare(0)).toBeCloseTo(3e-8, 15);
    expect(shapeShare(2.5e-8)).toBeCloseTo(0.5e-8, 15);
    expect(shapeShare(3e-8)).toBeCloseTo(0, 15);
  });
});

describe('timeTerm', () => {
  it('picks that scatter as their noise lets expect take the noise’s uncertainty, others their own', () => {
    const of = (spread: number) => {
      const model = new Model();
      const values = [9e-6 - spread, 9e-6, 9e-6 + spread];
      const first = firstOrder(timeTerm(model, { key: 'time.P', label: 'P', values, resolution: 0, picked: { ...picked(values, 0), pickUncertainty: 1e-8 } }));
      return [first.standardUncertainty * Math.sqrt(3), first.degreesOfFreedom] as const;
    };
    expect(of(0)[0]).toBeCloseTo(1e-8, 15);
    expect(of(1.4e-8)[0]).toBeCloseTo(1.4e-8, 15);
    expect(of(1.4e-8)[1]).toBe(Infinity);
    expect(of(1.6e-8)[0]).toBeCloseTo(1.6e-8, 15);
    expect(of(1.6e-8)[1]).toBeCloseTo(2, 9);
  });
});
