/**
 * One measurement model as an expression graph over named inputs. Because length, a calibration or a zero time is one input
 * however many quantities use it, terms common to several are treated as common by construction.
 *
 * Nodes are kept in the order in which they were made, so that each node's operands come before it: one pass forward
 * gives values, one pass backward exact gradients (reverse accumulation), and one pass over arrays evaluates many trials.
 */
import type { Distribution } from '../contract/result';

export interface InputSpec {
  /** Stable and unique within a model. */
  readonly key: string;
  readonly label: string;
  readonly unit: string;
  readonly value: number;
  readonly standardUncertainty: number;
  readonly type: 'A' | 'B';
  readonly distribution: Distribution;
  /** Infinity allowed. */
  readonly degreesOfFreedom: number;
  readonly source: string;
}

export type Operation = 'input' | 'constant' | 'add' | 'subtract' | 'multiply' | 'divide' | 'power';

export interface Node {
  readonly operation: Operation;
  readonly left: number;
  readonly right: number;
  /** A constant's value, or the exponent of a power. */
  readonly parameter: number;
  readonly value: number;
}

const NONE = -1;

/** What must be equal where two quantities name the same input. */
const FIGURES = ['value', 'standardUncertainty', 'distribution', 'degreesOfFreedom', 'unit'] as const;

export class Term {
  constructor(readonly model: Model, readonly index: number) {}

  get value(): number {
    return this.model.node(this.index).value;
  }

  plus(other: Term | number): Term {
    return this.model.combine('add', this, other);
  }

  minus(other: Term | number): Term {
    return this.model.combine('subtract', this, other);
  }

  times(other: Term | number): Term {
    return this.model.combine('multiply', this, other);
  }

  over(other: Term | number): Term {
    return this.model.combine('divide', this, other);
  }

  /** xⁿ for a constant n. */
  power(n: number): Term {
    return this.model.raise(this, n);
  }

  squareRoot(): Term {
    return this.power(0.5);
  }

  negated(): Term {
    return this.times(-1);
  }
}

export class Model {
  readonly inputs: InputSpec[] = [];
  /** Node index of each input. */
  readonly inputNodes: number[] = [];
  /** Correlation coefficients of input pairs, by `i,j` with i < j (positions in `inputs`). */
  readonly correlations = new Map<string, number>();
  private readonly nodes: Node[] = [];
  private readonly byKey = new Map<string, Term>();

  get size(): number {
    return this.nodes.length;
  }

  node(index: number): Node {
    const node = this.nodes[index];
    if (node === undefined) throw new RangeError(`No node ${index}`);
    return node;
  }

  /**
   * A named input. The same key with the same figures gives the same term: that is how quantities share it.
   * @throws RangeError when a key returns with other figures, or a figure is not finite
   */
  input(spec: InputSpec): Term {
    const known = this.byKey.get(spec.key);
    if (known !== undefined) {
      const before = this.inputs[this.inputNodes.indexOf(known.index)];
      if (before === undefined || FIGURES.some((figure) => before[figure] !== spec[figure])) throw new RangeError(`Input ${spec.key} is used with two different figures`);
      return known;
    }
    if (!Number.isFinite(spec.value) || !Number.isFinite(spec.standardUncertainty) || spec.standardUncertainty < 0 || !(spec.degreesOfFreedom > 0)) throw new RangeError(`Input ${spec.key} needs finite figures`);
    const term = this.append({ operation: 'input', left: NONE, right: NONE, parameter: this.inputs.length, value: spec.value });
    this.inputs.push(spec);
    this.inputNodes.push(term.index);
    this.byKey.set(spec.key, term);
    return term;
  }

  constant(value: number): Term {
    return this.append({ operation: 'constant', left: NONE, right: NONE, parameter: value, value });
  }

  /** Correlates two inputs. @throws RangeError when one is no input, or |r| > 1 */
  correlate(a: Term, b: Term, r: number): void {
    const [i, j] = [this.inputNodes.indexOf(a.index), this.inputNodes.indexOf(b.index)].sort((p, q) => p - q);
    if (i === undefined || j === undefined || i < 0 || i === j || !(Math.abs(r) <= 1)) throw new RangeError('Correlate two different inputs with −1 ≤ r ≤ 1');
    this.correlations.set(`${i},${j}`, r);
  }

  correlation(i: number, j: number): number {
    if (i === j) return 1;
    return this.correlations.get(i < j ? `${i},${j}` : `${j},${i}`) ?? 0;
  }

  combine(operation: 'add' | 'subtract' | 'multiply' | 'divide', a: Term, b: Term | number): Term {
    const other = typeof b === 'number' ? this.constant(b) : b;
    if (a.model !== this || other.model !== this) throw new RangeError('Terms of two models cannot be combined');
    return this.append({ operation, left: a.index, right: other.index, parameter: 0, value: apply(operation, a.value, other.value) });
  }

  raise(a: Term, n: number): Term {
    return this.append({ operation: 'power', left: a.index, right: NONE, parameter: n, value: a.value ** n });
  }

  /** Groups of inputs (positions) that hang together by correlation; an uncorrelated input is a group of one. */
  correlationGroups(): number[][] {
    const groups = this.inputs.map((_, i) => [i]);
    for (const key of this.correlations.keys()) {
      const [one, other] = key.split(',').map((i) => groups.find((group) => group.includes(Number(i))));
      if (one === undefined || other === undefined || one === other) continue;
      one.push(...other.splice(0));
      one.sort((p, q) => p - q);
    }
    return groups.filter((group) => group.length > 0);
  }

  /** Value of every node for other values of the inputs than their estimates. */
  nodeValues(inputs: ArrayLike<number>): Float64Array {
    const values = new Float64Array(this.nodes.length);
    this.nodes.forEach(({ operation, left, right, parameter }, k) => {
      const [a, b] = [values[left] ?? 0, values[right] ?? 0];
      if (operation === 'input') values[k] = inputs[parameter] ?? Number.NaN;
      else if (operation === 'constant') values[k] = parameter;
      else values[k] = operation === 'power' ? a ** parameter : apply(operation, a, b);
    });
    return values;
  }

  /** ∂term/∂input for every input, at the estimates or where `nodeValues` stand. */
  gradient(term: Term, at?: Float64Array): Float64Array {
    const adjoint = new Float64Array(term.index + 1);
    adjoint[term.index] = 1;
    const value = (k: number) => at?.[k] ?? this.node(k).value;
    for (let k = term.index; k >= 0; k -= 1) {
      const g = adjoint[k] ?? 0;
      if (g === 0) continue;
      const node = this.node(k);
      const add = (index: number, amount: number) => {
        adjoint[index] = (adjoint[index] ?? 0) + amount;
      };
      spread(node, g, node.left === NONE ? 0 : value(node.left), node.right === NONE ? 0 : value(node.right), add);
    }
    return Float64Array.from(this.inputNodes, (index) => adjoint[index] ?? 0);
  }

  private append(node: Node): Term {
    this.nodes.push(node);
    return new Term(this, this.nodes.length - 1);
  }
}

function apply(operation: 'add' | 'subtract' | 'multiply' | 'divide', a: number, b: number): number {
  if (operation === 'add') return a + b;
  if (operation === 'subtract') return a - b;
  return operation === 'multiply' ? a * b : a / b;
}

/** Hands a node's derivative g down to its operands, whose values are a and b. */
function spread({ operation, left, right, parameter }: Node, g: number, a: number, b: number, add: (index: number, amount: number) => void): void {
  if (operation === 'add' || operation === 'subtract') {
    add(left, g);
    add(right, operation === 'add' ? g : -g);
  } else if (operation === 'multiply') {
    add(left, g * b);
    add(right, g * a);
  } else if (operation === 'divide') {
    add(left, g / b);
    add(right, (-g * a) / (b * b));
  } else if (operation === 'power') {
    add(left, g * parameter * a ** (parameter - 1));
  }
}

/** Arithmetic mean of terms of one model. @throws RangeError for none */
export function mean(terms: readonly Term[]): Term {
  const [first, ...rest] = terms;
  if (first === undefined) throw new RangeError('The mean of no terms');
  return rest.reduce((sum, term) => sum.plus(term), first).over(terms.length);
}
