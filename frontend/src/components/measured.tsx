/** A value with its expanded uncertainty, one typographic unit; the digits follow the uncertainty. */
import type { ConstantResult, Quantity } from '@strainwright/common/contract/result';
import { withDecimalStyle } from '@strainwright/common/quantities/decimal';
import { formatMeasured } from '@strainwright/common/quantities/presentation';
import { Box, Tooltip } from '@mui/material';
import { useSession } from '../api/session';

export function useDecimalStyle(): '.' | ',' {
  return useSession().user?.decimalStyle ?? '.';
}

interface Statement { value: number; U: number; unit: string; legend: string }

function Statement({ value, U, unit, legend }: Statement) {
  const style = useDecimalStyle();
  const s = formatMeasured(value, U, unit);
  return (
    <Tooltip title={legend}>
      <Box component="span" className="mono" tabIndex={0} sx={{ whiteSpace: 'nowrap' }}>
        {withDecimalStyle(s.value, style)}
        <Box component="span" sx={{ color: 'text.secondary' }}> ± {withDecimalStyle(s.uncertainty, style)}</Box>
        {s.unit !== '' && ` ${s.unit}`}
      </Box>
    </Tooltip>
  );
}

export function Measured({ constant }: { constant: ConstantResult | null }) {
  if (constant === null) return <span className="mono">not determined</span>;
  const { value, expandedUncertainty, unit, coverageFactor, degreesOfFreedom, interval } = constant;
  const low = formatMeasured(interval.low, expandedUncertainty, unit);
  const high = formatMeasured(interval.high, expandedUncertainty, unit);
  const legend = `Expanded uncertainty, k = ${coverageFactor.toFixed(2)}, ν_eff = ${degreesOfFreedom === null ? '∞' : Math.floor(degreesOfFreedom)}, 95 %. Monte Carlo, shortest 95 %: ${low.value} to ${high.value}${high.unit === '' ? '' : ` ${high.unit}`}. ${constant.origin === 'measured' ? 'Measured' : 'Derived'}.`;
  return <Statement value={value} U={expandedUncertainty} unit={unit} legend={legend} />;
}

/** A quantity at k = 2. `scale` and `unit` show SI in the unit people use. */
export function MeasuredQuantity({ quantity, scale = 1, unit }: { quantity: Quantity | null; scale?: number; unit?: string }) {
  if (quantity === null) return <span className="mono">–</span>;
  return <Statement value={quantity.value / scale} U={(2 * quantity.standardUncertainty) / scale} unit={unit ?? quantity.unit} legend="Expanded uncertainty, k = 2" />;
}

/** A plain number in the person's decimal style. */
export function Numeral({ value, digits = 5 }: { value: number; digits?: number }) {
  const style = useDecimalStyle();
  const text = value !== 0 && (Math.abs(value) < 1e-3 || Math.abs(value) >= 1e7) ? value.toExponential(digits - 1) : String(Number(value.toPrecision(digits)));
  return <span className="mono">{withDecimalStyle(text, style)}</span>;
}
