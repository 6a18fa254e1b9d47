/**
 * The constants plate: a square with E, ν, K and G at its corners. A solid corner was measured directly, an outlined one derived;
 * an edge carries the agreement of a pair that was measured more than once. Reads without colour, has a text equivalent, prints.
 */
import type { ElasticResult } from '@strainwright/common/contract/result';
import { CONSTANTS, type ConstantName } from '@strainwright/common/contract/vocabulary';
import { measuredText } from '@strainwright/common/quantities/presentation';
import { Box, Typography } from '@mui/material';
import { visuallyHidden } from '@mui/utils';
import { Measured } from './measured';

export interface PlateAgreement { constant: ConstantName; en: number; agrees: boolean }
type Constants = ElasticResult['constants'];

const NAMES: Readonly<Record<ConstantName, string>> = { E: 'Young’s modulus', nu: 'Poisson’s ratio', G: 'Shear modulus', K: 'Bulk modulus' };
export const SYMBOLS: Readonly<Record<ConstantName, string>> = { E: 'E', nu: 'ν', G: 'G', K: 'K' };
const CORNERS: readonly ConstantName[] = ['E', 'nu', 'G', 'K'];
const AT: Readonly<Record<ConstantName, readonly [number, number]>> = { E: [0, 0], nu: [100, 0], G: [0, 100], K: [100, 100] };
const EDGES: readonly (readonly [ConstantName, ConstantName])[] = [['E', 'nu'], ['E', 'G'], ['nu', 'K'], ['G', 'K'], ['E', 'K'], ['nu', 'G']];

/** What the plate says, as one sentence a constant. */
export function plateText(constants: Constants, basis: string): string {
  const parts = CONSTANTS.map((name) => {
    const c = constants[name];
    return c === null ? `${NAMES[name]} ${SYMBOLS[name]} not determined` : `${NAMES[name]} ${SYMBOLS[name]} = ${measuredText(c.value, c.expandedUncertainty, c.unit)}, ${c.origin}`;
  });
  return `${basis === 'static' ? 'Static' : 'Dynamic'} constants, expanded uncertainties for 95 %: ${parts.join('; ')}.`;
}

function edgeState(a: ConstantName, b: ConstantName, agreements: readonly PlateAgreement[]): 'agrees' | 'differs' | 'none' {
  const of = (name: ConstantName) => agreements.filter((x) => x.constant === name);
  const [x, y] = [of(a), of(b)];
  if (x.length === 0 || y.length === 0) return 'none';
  return [...x, ...y].every((one) => one.agrees) ? 'agrees' : 'differs';
}

function Corner({ constants, name }: { constants: Constants; name: ConstantName }) {
  const c = constants[name];
  const right = AT[name][0] === 100;
  const isSolid = c?.origin === 'measured';
  return (
    <Box sx={{ display: 'flex', flexDirection: 'column', alignItems: right ? 'flex-end' : 'flex-start', textAlign: right ? 'right' : 'left', justifyContent: AT[name][1] === 0 ? 'flex-start' : 'flex-end', p: 2, minWidth: 0 }}>
      <Box sx={{ display: 'flex', alignItems: 'center', gap: 1, flexDirection: right ? 'row-reverse' : 'row' }}>
        <Box aria-hidden="true" sx={{ width: 14, height: 14, border: '2px solid', borderColor: 'text.primary', bgcolor: isSolid ? 'text.primary' : 'background.paper', borderStyle: c === null ? 'dotted' : 'solid' }} />
        <Typography component="span" sx={{ fontSize: '1.25rem', fontWeight: 500, fontStyle: 'italic' }}>{SYMBOLS[name]}</Typography>
      </Box>
      <Box sx={{ fontSize: { xs: '0.875rem', sm: '1.0625rem' }, bgcolor: 'background.paper' }}><Measured constant={c} /></Box>
      <Typography variant="caption" color="textSecondary" sx={{ bgcolor: 'background.paper' }}>{NAMES[name]}{c === null ? '' : `, ${c.origin}`}</Typography>
    </Box>
  );
}

export function ConstantsPlate({ constants, basis, agreements = [] }: { constants: Constants; basis: string; agreements?: readonly PlateAgreement[] }) {
  return (
    <Box component="figure" sx={{ m: 0, maxWidth: 560 }}>
      <Box sx={{ position: 'relative', border: '1px solid', borderColor: 'text.primary', borderRadius: 1, bgcolor: 'background.paper' }}>
        <Box component="svg" viewBox="0 0 100 100" preserveAspectRatio="none" aria-hidden="true" sx={{ position: 'absolute', inset: 16, width: 'calc(100% - 32px)', height: 'calc(100% - 32px)', color: 'divider' }}>
          {EDGES.map(([a, b]) => {
            const state = edgeState(a, b, agreements);
            const [[x1, y1], [x2, y2]] = [AT[a], AT[b]];
            return (
              <Box component="line" key={`${a}${b}`} x1={x1} y1={y1} x2={x2} y2={y2} vectorEffect="non-scaling-stroke" stroke="currentColor"
                sx={{ color: state === 'none' ? 'divider' : state === 'agrees' ? 'success.main' : 'error.main', strokeWidth: state === 'none' ? 1 : 3, strokeDasharray: state === 'differs' ? '6 4' : 'none' }} />
            );
          })}
        </Box>
        <Box sx={{ position: 'relative', display: 'grid', gridTemplateColumns: '1fr 1fr', gridAutoRows: 'minmax(112px, auto)' }}>
          {CORNERS.map((name) => <Corner key={name} name={name} constants={constants} />)}
        </Box>
      </Box>
      <Typography component="figcaption" variant="caption" color="textSecondary">
        {basis === 'static' ? 'Static' : 'Dynamic'}. ± expanded uncertainty, 95 %. Solid corner: measured; outlined: derived.
        <span style={visuallyHidden}>{plateText(constants, basis)}</span>
      </Typography>
    </Box>
  );
}
