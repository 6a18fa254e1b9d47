/**
 * A value with its expanded uncertainty as one statement: the uncertainty to two significant figures, the value to the same
 * place (JCGM 100 7.2.6). Ties round half to even (ISO 80000-1 Annex B rule A), in exact decimal arithmetic.
 */
import Decimal from 'decimal.js';

const Exact = Decimal.clone({ precision: 60 });

export interface Statement {
  value: string;
  uncertainty: string;
  unit: string;
}

/** `upwards` never understates the uncertainty, as JCGM 100 7.2.6 allows; the value still rounds half to even. */
export type Rounding = 'half-even' | 'half-up' | 'upwards';

/** Rounds a decimal text or number; `figures` significant figures for the uncertainty. */
export function roundStatement(value: number | string, uncertainty: number | string, rounding: Rounding = 'half-even', figures = 2): { value: string; uncertainty: string } {
  const mode = rounding === 'half-up' ? Decimal.ROUND_HALF_UP : Decimal.ROUND_HALF_EVEN;
  const U = new Exact(uncertainty).abs();
  const y = new Exact(value);
  if (U.isZero()) return { value: y.toFixed(), uncertainty: '0' };
  const rounded = U.toSignificantDigits(figures, rounding === 'upwards' ? Decimal.ROUND_UP : mode);
  // Rounding up may carry into a new place (99.6 → 100); the place follows the rounded figure.
  const place = Math.floor(Math.log10(rounded.toNumber()) + 1e-12) - (figures - 1);
  const step = Exact.pow(10, place);
  const decimals = Math.max(0, -place);
  const toPlace = (x: Decimal) => x.div(step).toDecimalPlaces(0, mode).times(step).toFixed(decimals);
  return { value: toPlace(y), uncertainty: toPlace(rounded) };
}

const PASCALS: readonly { unit: string; factor: number }[] = [
  { unit: 'GPa', factor: 1e9 }, { unit: 'MPa', factor: 1e6 }, { unit: 'kPa', factor: 1e3 }, { unit: 'Pa', factor: 1 },
];

/** The engineering unit in which a pressure reads best. */
export function pressureUnit(value: number): { unit: string; factor: number } {
  return PASCALS.find((p) => Math.abs(value) >= p.factor * 0.9999999) ?? { unit: 'Pa', factor: 1 };
}

/** `unit` is SI: Pa shows as GPa, MPa or kPa; `1` shows none; any other stays as it is. */
export function formatMeasured(value: number, expandedUncertainty: number, unit: string): Statement {
  if (!Number.isFinite(value)) return { value: '–', uncertainty: '–', unit: unit === '1' ? '' : unit };
  const scale = unit === 'Pa' ? pressureUnit(value) : { unit: unit === '1' ? '' : unit, factor: 1 };
  if (!Number.isFinite(expandedUncertainty)) return { value: String(value / scale.factor), uncertainty: '∞', unit: scale.unit };
  const rounded = roundStatement(new Exact(value).div(scale.factor).toString(), new Exact(expandedUncertainty).div(scale.factor).toString());
  return { ...rounded, unit: scale.unit };
}

/** `70.30 ± 0.92 GPa`. */
export function measuredText(value: number, expandedUncertainty: number, unit: string): string {
  const s = formatMeasured(value, expandedUncertainty, unit);
  return `${s.value} ± ${s.uncertainty}${s.unit === '' ? '' : ` ${s.unit}`}`;
}
