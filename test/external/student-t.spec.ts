/** Two-sided quantiles of Student's t; they agree with JCGM 100 Table G.2 to its two decimals. */
import { coverageFactor } from '@strainwright/common/uncertainty/first-order';
import table from './student-t.json';

describe.each(table.rows)('ν = $dof', ({ dof, t }) => {
  it.each(table.p.map((p, i) => ({ p, expected: t[i] })))('covers $p with k = $expected', ({ p, expected }) => {
    const k = coverageFactor(dof === 'inf' ? Infinity : Number(dof), p);
    expect(Math.abs(k - (expected ?? Number.NaN))).toBeLessThanOrEqual(5.1e-7 * Math.max(1, k));
  });
});
