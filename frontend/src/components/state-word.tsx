/** A state as a word with a shape: never colour alone. */
import { Box } from '@mui/material';

type Tone = 'note' | 'warn' | 'stop' | 'good' | 'quiet';
const TONES: Readonly<Record<string, Tone>> = {
  requested: 'note', open: 'good', reported: 'good', closed: 'quiet', cancelled: 'quiet', draft: 'note', submitted: 'warn', accepted: 'good', returned: 'stop',
  superseded: 'quiet', released: 'good', withdrawn: 'stop', recorded: 'good', void: 'quiet', queued: 'note', running: 'note', done: 'good', failed: 'stop',
  'in calibration': 'good', 'due soon': 'warn', lapsed: 'stop', 'never calibrated': 'stop', 'within limits': 'good', 'out of limits': 'stop', active: 'good', inactive: 'quiet',
  'genuine and current': 'good', 'genuine but superseded': 'warn', 'genuine but withdrawn': 'stop', 'not ours': 'stop', note: 'note', warn: 'warn', stop: 'stop',
};
const COLOUR: Readonly<Record<Tone, string>> = { note: 'info.main', warn: 'warning.main', stop: 'error.main', good: 'success.main', quiet: 'text.secondary' };
const SHAPE: Readonly<Record<Tone, string>> = { note: 'M2 6 a4 4 0 1 0 8 0 a4 4 0 1 0 -8 0', warn: 'M6 1 L11 11 L1 11 Z', stop: 'M2 2 L10 2 L10 10 L2 10 Z', good: 'M1.5 6.5 L4.5 9.5 L10.5 2.5', quiet: 'M1.5 6 L10.5 6' };

export function StateWord({ state }: { state: string }) {
  const tone = TONES[state] ?? 'quiet';
  const isLine = tone === 'good' || tone === 'quiet';
  return (
    <Box component="span" sx={{ display: 'inline-flex', alignItems: 'center', gap: 0.75, color: COLOUR[tone], fontWeight: 500, whiteSpace: 'nowrap' }}>
      <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true"><path d={SHAPE[tone]} fill={isLine ? 'none' : 'currentColor'} stroke="currentColor" strokeWidth={isLine ? 2 : 0} /></svg>
      {state}
    </Box>
  );
}
