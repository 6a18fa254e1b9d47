import { DraftFault, emptyRun, runToSend } from './run-draft';

const pulse = () => {
  const draft = emptyRun('2026-11-30T10:00');
  draft.methodId = '0190f3a0-0000-7000-8000-000000000000';
  draft.P = { ...draft.P, times: '8.51\n8.52', zeroTimes: '0.03' };
  draft.S = { ...draft.S, times: '15.5 15.6', zeroTimes: '0.04' };
  return draft;
};

describe('runToSend', () => {
  it('turns µs into seconds and kHz into hertz', () => {
    const body = runToSend({ ...pulse(), frequency: '1000' }, 'pulse', [], '.');
    if (body.record.kind !== 'pulse') throw new Error('not a pulse run');
    expect(body.record.P.readings).toEqual([8.51e-6, 8.52e-6]);
    expect(body.record.frequency).toBe(1e6);
  });

  it('names the field that cannot be read', () => {
    const draft = pulse();
    draft.P.times = '8.5x';
    expect(() => runToSend(draft, 'pulse', [], '.')).toThrow(DraftFault);
  });

  it('does not let a zero time be forgotten, only left out on purpose', () => {
    const draft = pulse();
    draft.S.zeroTimes = '';
    expect(() => runToSend(draft, 'pulse', [], '.')).toThrow(/zero time of S/);
    draft.S.zeroBy = 'none';
    const body = runToSend(draft, 'pulse', [], '.');
    expect(body.record.kind === 'pulse' && body.record.S.zero).toBeNull();
  });

  it('turns gauge lengths into metres', () => {
    const body = runToSend({ ...pulse(), axialGaugeLength: '50' }, 'stress-strain', ['record'], '.');
    expect(body.record.kind === 'stress-strain' && body.record.axialGaugeLength).toBe(0.05);
  });
});
