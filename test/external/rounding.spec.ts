/**
 * Value and expanded uncertainty as printed: two figures of U, the value to the same place. Ties after ISO 80000-1 Annex B, rule A (half to
 * even) or rule B (half away; from memory); JCGM 100 7.2.6 allows rounding U up. Worked out in exact decimal arithmetic.
 */
import { roundStatement } from '@strainwright/common/quantities/presentation';
import rows from './rounding.json';

describe.each(rows)('$y ± $U', ({ y, U, halfEven, halfUp, upwards }) => {
  it('half to even', () => {
    expect(roundStatement(y, U)).toEqual({ value: halfEven.y, uncertainty: halfEven.U });
  });
  it('half up', () => {
    expect(roundStatement(y, U, 'half-up').value).toBe(halfUp.y);
  });
  it('U upwards', () => {
    expect(roundStatement(y, U, 'upwards').uncertainty).toBe(upwards);
  });
  it('takes doubles as well as decimal texts', () => {
    expect(roundStatement(Number(y), Number(U))).toEqual({ value: halfEven.y, uncertainty: halfEven.U });
  });
});
