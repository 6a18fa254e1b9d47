import { mean, Model, type InputSpec, type Term } from './model';
import { RandomStream } from './random-stream';

const spec = (key: string, value: number, more: Partial<InputSpec> = {}): InputSpec => ({
  key, label: key, unit: 'm', value, standardUncertainty: 0.01, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'test', ...more,
});

/** A random expression of 30 operations over four inputs, kept to values between 0.1 and 10 so that differences stay accurate. */
function randomModel(seed: number): { model: Model; term: Term } {
  const random = new RandomStream(seed);
  const model = new Model();
  const terms = ['a', 'b', 'c', 'd'].map((key) => model.input(spec(key, 0.5 + 1.5 * random.uniform())));
  const pick = () => terms[Math.floor(random.uniform() * terms.length)] as Term;
  while (terms.length < 34) {
    const [x, y] = [pick(), pick()];
    const made = [x.plus(y), x.minus(y), x.times(y), x.over(y), x.power(2), x.power(-1.5), x.squareRoot(), x.times(1.7), x.plus(0.3)][Math.floor(random.uniform() * 9)] as Term;
    if (made.value > 0.1 && made.value < 10) terms.push(made);
  }
  return { model, term: mean(terms.slice(-6)) };
}

describe('Model', () => {
  it.each(Array.from({ length: 40 }, (_, seed) => seed))('gives the exact gradient of random model %d', (seed) => {
    const { model, term } = randomModel(seed);
    const x = model.inputs.map((input) => input.value);
    const h = 1e-6;
    const at = (values: number[]) => model.nodeValues(values)[term.index] as number;
    expect(at(x)).toBe(term.value);
    model.gradient(term).forEach((g, i) => {
      const difference = (at(x.with(i, (x[i] as number) + h)) - at(x.with(i, (x[i] as number) - h))) / (2 * h);
      expect(Math.abs(g - difference)).toBeLessThan(1e-6 * Math.max(1, Math.abs(g)));
    });
  });

  it('gives the gradient elsewhere than at the estimates', () => {
    const model = new Model();
    const x = model.input(spec('x', 3));
    expect([...model.gradient(x.power(2))]).toEqual([6]);
    const square = x.power(2);
    expect([...model.gradient(square, model.nodeValues([5]))]).toEqual([10]);
  });

  it('takes the same key as the same input, and refuses other figures under it', () => {
    const model = new Model();
    const length = model.input(spec('length', 0.05));
    expect(model.input(spec('length', 0.05))).toBe(length);
    expect([...model.gradient(length.minus(model.input(spec('length', 0.05))))]).toEqual([0]);
    for (const other of [{ value: 0.051 }, { standardUncertainty: 0.02 }, { distribution: 'rectangular' as const }, { degreesOfFreedom: 3 }, { unit: 's' }]) {
      expect(() => model.input(spec('length', 0.05, other))).toThrow('two different figures');
    }
  });

  it.each([{ value: Number.NaN }, { standardUncertainty: -1 }, { standardUncertainty: Infinity }, { degreesOfFreedom: 0 }])('refuses an input with %j', (wrong) => {
    expect(() => new Model().input(spec('x', 1, wrong))).toThrow(RangeError);
  });

  it('refuses terms of two models and correlations of what is no pair of inputs', () => {
    const [one, two] = [new Model(), new Model()];
    const [a, b] = [one.input(spec('a', 1)), one.input(spec('b', 1))];
    expect(() => a.plus(two.input(spec('a', 1)))).toThrow('two models');
    for (const wrong of [() => one.correlate(a, a, 0.5), () => one.correlate(a, a.plus(b), 0.5), () => one.correlate(a, b, 1.1), () => one.correlate(a, b, Number.NaN)]) expect(wrong).toThrow(RangeError);
    expect(() => mean([])).toThrow(RangeError);
  });

  it('groups inputs that hang together by correlation', () => {
    const model = new Model();
    const [a, b, , d, e] = ['a', 'b', 'c', 'd', 'e'].map((key) => model.input(spec(key, 1))) as [Term, Term, Term, Term, Term];
    model.correlate(e, a, 0.5);
    model.correlate(d, b, 0.5);
    model.correlate(a, b, -0.2);
    expect(model.correlationGroups().map((group) => group.join()).sort()).toEqual(['0,1,3,4', '2']);
    expect([model.correlation(4, 0), model.correlation(0, 4), model.correlation(2, 2), model.correlation(0, 2)]).toEqual([0.5, 0.5, 1, 0]);
  });
});
