import { RandomStream } from '../uncertainty/random-stream';
import { loadingBranch } from './loading-branch';

const ramp = (from: number, to: number, rows: number): number[] => Array.from({ length: rows }, (_, i) => from + ((to - from) * i) / rows);

describe('loadingBranch', () => {
  it('takes the whole of a record that only rises', () => {
    expect(loadingBranch(Float64Array.from(ramp(0, 100, 50)))).toEqual({ from: 0, rise: 0, to: 49, loadings: 1 });
  });

  it('takes the last of loadings to one level', () => {
    const cycle = [...ramp(0, 20, 20), ...ramp(20, 0, 20)];
    const branch = loadingBranch(Float64Array.from([...cycle, ...cycle, ...cycle]));
    expect(branch).toMatchObject({ from: 80, to: 100, loadings: 3 });
  });

  it('takes the branch that reaches the maximum, not a lower one after it', () => {
    const branch = loadingBranch(Float64Array.from([...ramp(0, 40, 20), ...ramp(40, 5, 20), ...ramp(5, 100, 50), ...ramp(100, 0, 50), ...ramp(0, 60, 30)]));
    expect(branch).toMatchObject({ from: 40, to: 90, loadings: 2 });
  });

  it('starts after a rest at the valley', () => {
    const branch = loadingBranch(Float64Array.from([...Array<number>(100).fill(0), ...ramp(0, 100, 50)]));
    expect(branch).toMatchObject({ from: 0, rise: 100 });
  });

  it('is not misled by noise into a turn', () => {
    const random = new RandomStream(5);
    const noisy = Float64Array.from(ramp(0, 100, 20_000), (v) => v + 1.5 * random.normal());
    const branch = loadingBranch(noisy);
    expect(branch?.from).toBeLessThan(2000);
    expect(branch?.to).toBeGreaterThan(18_000);
    expect(branch?.loadings).toBe(1);
  });

  it('is not misled by a single row that leaps, in the middle or at the top', () => {
    const leaping = Float64Array.from(ramp(0, 100, 50));
    leaping[10] = 60;
    leaping[30] = 20;
    leaping[45] = 150;
    expect(loadingBranch(leaping)).toEqual({ from: 0, rise: 0, to: 49, loadings: 1 });
  });

  it('finds none where stress never rises', () => {
    expect(loadingBranch(Float64Array.from([5, 5, 5]))).toBeNull();
    expect(loadingBranch(Float64Array.from([5, 4, 3, 2]))).toBeNull();
  });
});
