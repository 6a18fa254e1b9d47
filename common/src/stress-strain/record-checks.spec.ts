import { recordFindings, stepsOf } from './record-checks';

const rows = 200;
const strain = Float64Array.from({ length: rows }, (_, i) => i * 1e-5);
const stress = strain.map((v) => 70e9 * v);
const codes = (time: Float64Array | null, y: Float64Array, x: Float64Array) => recordFindings(time, y, x).map((f) => [f.code, f.subject]);

describe('recordFindings', () => {
  it('are none for a sound record', () => {
    expect(codes(strain.map((v) => v * 1e6), stress, strain)).toEqual([]);
  });

  it('tell where time runs backwards', () => {
    const time = strain.map((_, i) => (i === 50 ? 3 : i));
    expect(recordFindings(time, stress, strain)[0]).toMatchObject({ code: 'TIME_NOT_MONOTONIC', seen: 'Time falls at 1 of 200 rows, first at row 51' });
  });

  it('tell a channel that stays at its stop while the other moves', () => {
    expect(codes(null, stress.map((v) => Math.min(v, 100e6)), strain)).toEqual([['RECORD_SATURATED', 'stress']]);
    expect(codes(null, stress, strain.map((v) => Math.min(v, 1.5e-3)))).toEqual([['RECORD_SATURATED', 'axial strain']]);
  });

  it('do not take a hold of both channels for a stop', () => {
    expect(codes(null, stress.map((v) => Math.min(v, 100e6)), strain.map((v) => Math.min(v, 100e6 / 70e9)))).toEqual([]);
  });
});

describe('stepsOf', () => {
  it('finds the steps of a coarse channel', () => {
    expect(stepsOf(strain.map((v) => Math.round(v / 1e-4) * 1e-4))).toBeCloseTo(1e-4, 10);
  });

  it('sees none in a channel whose rows all differ, nor in a short one', () => {
    expect(stepsOf(strain)).toBe(0);
    expect(stepsOf(Float64Array.of(1, 1, 2, 2))).toBe(0);
  });
});
