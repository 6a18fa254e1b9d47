/** How far one specimen is, as steps in words. */
import type { Limit, SpecimenProgress } from '@strainwright/common/contract/orders';
import { Box } from '@mui/material';
import { ConstantsPlate, SYMBOLS } from '../../components/constants-plate';
import { Numeral } from '../../components/measured';

const STEPS = ['received', 'measured', 'tested', 'fitted', 'reported'] as const;

export function Progress({ specimen, reported }: { specimen: SpecimenProgress; reported: boolean }) {
  const done = { received: specimen.received, measured: specimen.measured, tested: specimen.tested.length > 0, fitted: specimen.fitted.length > 0, reported };
  return (
    <Box component="ol" aria-label={`Progress of ${specimen.mark}`} sx={{ display: 'flex', flexWrap: 'wrap', gap: 1.5, listStyle: 'none', m: 0, p: 0, fontSize: '0.8125rem' }}>
      {STEPS.map((step) => (
        <Box component="li" key={step} sx={{ color: done[step] ? 'success.main' : 'text.secondary', fontWeight: done[step] ? 500 : 400 }}>
          <span aria-hidden="true">{done[step] ? '● ' : '○ '}</span>{step}{done[step] ? '' : ' – not yet'}
        </Box>
      ))}
    </Box>
  );
}

export function SpecimenPlates({ specimen }: { specimen: SpecimenProgress }) {
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 2, mt: 1 }}>
      {specimen.constants.map(({ basis, ...constants }) => <Box key={basis} sx={{ flex: '1 1 360px', maxWidth: 560 }}><ConstantsPlate constants={constants} basis={basis} /></Box>)}
    </Box>
  );
}

export function LimitText({ limit }: { limit: Limit }) {
  const scale = limit.constant === 'nu' ? 1 : 1e9;
  const unit = limit.constant === 'nu' ? '' : ' GPa';
  return (
    <span>
      {limit.lower !== null && <><Numeral value={limit.lower / scale} />{unit} ≤ </>}{SYMBOLS[limit.constant]}{limit.upper !== null && <> ≤ <Numeral value={limit.upper / scale} />{unit}</>}, rule: {limit.rule}
    </span>
  );
}
