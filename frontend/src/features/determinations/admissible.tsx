/** Where ν lies in the admissible region −1 < ν < 0.5, as a scale with its interval. */
import type { ElasticResult } from '@strainwright/common/contract/result';
import { Box, Typography } from '@mui/material';

const LOW = -1;
const HIGH = 0.5;
const MARKS = [-1, -0.5, 0, 0.25, 0.5];
const place = (nu: number) => `${Math.min(100, Math.max(0, ((nu - LOW) / (HIGH - LOW)) * 100))}%`;

export function AdmissibleRegion({ constants }: { constants: ElasticResult['constants'] }) {
  const { nu } = constants;
  if (nu === null) return null;
  const text = `ν = ${nu.value.toFixed(4)}, 95 % between ${nu.interval.low.toFixed(4)} and ${nu.interval.high.toFixed(4)}; admissible between −1 and 0.5`;
  return (
    <Box role="img" aria-label={text} sx={{ maxWidth: 560, px: 1 }}>
      <Box sx={{ position: 'relative', height: 28, borderBottom: '2px solid', borderColor: 'text.primary' }}>
        <Box sx={{ position: 'absolute', bottom: 0, height: 12, bgcolor: 'primary.main', opacity: 0.35, left: place(nu.interval.low), right: `calc(100% - ${place(nu.interval.high)})`, minWidth: 2 }} />
        <Box sx={{ position: 'absolute', bottom: 0, height: 22, width: 2, bgcolor: 'primary.main', left: place(nu.value) }} />
      </Box>
      <Box sx={{ position: 'relative', height: 22 }}>{MARKS.map((m) => <Typography key={m} variant="caption" className="mono" sx={{ position: 'absolute', left: place(m), transform: 'translateX(-50%)' }}>{String(m).replace('-', '−')}</Typography>)}</Box>
      <Typography variant="caption" color="textSecondary">{text}</Typography>
    </Box>
  );
}
