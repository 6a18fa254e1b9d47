import { calibrationState, inForce } from './calibration-state';

describe('inForce', () => {
  const first = { calibratedOn: '2024-03-01', enteredAt: '2024-03-02T08:00:00Z', dueOn: '2025-03-01' };
  const second = { calibratedOn: '2025-03-10', enteredAt: '2025-03-11T08:00:00Z', dueOn: '2026-03-10' };
  const corrected = { ...second, enteredAt: '2025-03-12T08:00:00Z', dueOn: '2026-03-09' };

  it.each([
    { what: 'none before the first', on: '2024-02-29', expected: undefined },
    { what: 'the first on its own day', on: '2024-03-01', expected: first },
    { what: 'the first until the day before the second', on: '2025-03-09', expected: first },
    { what: 'the one entered last of two on a day', on: '2025-03-10', expected: corrected },
  ])('is $what', ({ on, expected }) => {
    expect(inForce([second, first, corrected], on)).toBe(expected);
  });
});

describe('calibrationState', () => {
  it.each([
    { dueOn: '2025-05-31', state: 'lapsed' },
    { dueOn: '2025-06-01', state: 'due soon' },
    { dueOn: '2025-07-01', state: 'due soon' },
    { dueOn: '2025-07-02', state: 'in calibration' },
  ])('on 1 June 2025, due on $dueOn, is $state', ({ dueOn, state }) => {
    expect(calibrationState({ dueOn }, '2025-06-01')).toBe(state);
  });

  it('is never calibrated without a calibration', () => {
    expect(calibrationState(undefined, '2025-06-01')).toBe('never calibrated');
  });
});
