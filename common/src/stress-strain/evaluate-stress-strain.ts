/**
 * Evaluation of one stress–strain run: channels, loading branch, window, lines, constants with their uncertainty, findings, and what
 * a person needs to judge them. Strains and stresses of windows count from the file's own zero, loading positive, before toe correction.
 */
import type { Finding, FitResult, StressStrainDetail } from '../contract/result';
import type { StressStrainRecord, StressStrainSettings } from '../contract/runs';
import { DIMENSIONS_OF_SHAPE, type ConstantName, type MaterialClass, type Shape } from '../contract/vocabulary';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding, type FindingCode } from '../findings/findings';
import { calibrationFindings, rangeFindings, type InstrumentState } from '../specimens/instrument-state';
import { measureSpecimen, type ReadingState, type SpecimenMeasurement } from '../specimens/measure-specimen';
import { elasticResult } from '../uncertainty/elastic-result';
import { uncertaintyOf } from '../uncertainty/first-order';
import { Model, type Term } from '../uncertainty/model';
import { alternativeWindows, narrowedSpread } from './alternatives';
import { readChannels, type RawChannel, type RecordChannels } from './channels';
import { ROLE_NAMES, type Role } from './instrument-terms';
import type { Branch, Line, RegionFit } from './line-fit';
import { loadingBranch, type LoadingBranch } from './loading-branch';
import { momentsOf, slopeOf } from './moments';
import { recordFindings, stepsOf } from './record-checks';
import { selectRegion, type SelectedRegion } from './select-region';
import { staticConstants } from './static-constants';
import { thinned } from './thin';
import { bendingFindings, bendingPercent, stepFindings, windowFindings } from './window-checks';

export interface StressStrainInput {
  readonly specimen: { readonly shape: Shape; readonly materialClass: MaterialClass };
  readonly readings: readonly ReadingState[];
  readonly record: StressStrainRecord;
  readonly settings: StressStrainSettings;
  readonly performedAt: string;
  readonly instruments: Readonly<Record<Role, InstrumentState | null>>;
  readonly channels: readonly RawChannel[];
  readonly seed: number;
}

const CURVE_POINTS = 2000;
const RESIDUAL_POINTS = 1000;

function refuse(code: FindingCode, subject: string, seen: string): never {
  throw new EvaluationRefused([finding(code, subject, seen)]);
}

/** Only the cross-section matters here: length and mass stay out of the budget. */
function crossSection(input: StressStrainInput, model: Model): SpecimenMeasurement {
  const [, ...across] = DIMENSIONS_OF_SHAPE[input.specimen.shape];
  const readings = input.readings.filter((r) => across.includes(r.quantity));
  return measureSpecimen(model, input.specimen.shape, input.specimen.materialClass, readings);
}

/** The loading branch to fit, after the signs have been judged by the way from the first row to the stress furthest from it. */
function branchOf({ stress, axial }: RecordChannels): LoadingBranch {
  let furthest = 0;
  stress.forEach((value, i) => {
    if (Math.abs(value - stress[0]!) > Math.abs(stress[furthest]! - stress[0]!)) furthest = i;
  });
  if (furthest === 0) return refuse('STRAIN_CONSTANT', 'stress', `Stress is ${stress[0]!.toPrecision(4)} Pa in all ${stress.length} rows`);
  const loading = momentsOf(axial.mean, stress, 0, furthest + 1);
  if (axial.mean.every((v) => v === axial.mean[0])) return refuse('STRAIN_CONSTANT', 'axial', `Axial strain is ${axial.mean[0]!.toPrecision(4)} in all rows while the stress changes`);
  if (slopeOf(loading) < 0) return refuse('SIGN_REVERSED', 'axial', `Stress over axial strain has the slope ${(slopeOf(loading) / 1e9).toPrecision(3)} GPa during loading`);
  return loadingBranch(stress) ?? refuse('SIGN_REVERSED', 'stress', 'The stress never rises in the order recorded');
}

function sliced(channels: RecordChannels, { from, to }: LoadingBranch): Branch {
  const part = (values: Float64Array) => values.subarray(from, to + 1);
  return { x: part(channels.axial.mean), y: part(channels.stress), t: channels.transverse === null ? null : part(channels.transverse.mean) };
}

function instrumentFindings(input: StressStrainInput, channels: RecordChannels, fit: RegionFit, area: Term | null): Finding[] {
  const gauge = (extension: boolean, length: number | null) => (extension ? (length ?? 1) : 1);
  const found: Finding[] = [];
  const look = (role: Role, low: number, high: number, unit: string) => {
    const instrument = input.instruments[role];
    if (instrument === null) found.push(finding('INSTRUMENT_MISSING', role, `No instrument is named for ${ROLE_NAMES[role]}; ±1 % was assumed for it`));
    else found.push(...calibrationFindings(instrument, input.performedAt), ...rangeFindings(instrument, [low, high], (v) => `${v.toPrecision(4)} ${unit}`.trim()));
  };
  const A = area?.value ?? null;
  if (A === null) look('force', Number.NaN, Number.NaN, '');
  else look('force', fit.stressFrom * A, fit.stressTo * A, 'N');
  const axial = gauge(channels.axial.extension, input.record.axialGaugeLength);
  look('axial', fit.strainFrom * axial, fit.strainTo * axial, channels.axial.extension ? 'm' : '');
  if (channels.transverse !== null && fit.transverse !== null) {
    const across = gauge(channels.transverse.extension, input.record.transverseGaugeLength);
    look('transverse', Number.NaN, Math.abs(fit.transverse.slope) * (fit.strainTo - fit.strainFrom) * across, channels.transverse.extension ? 'm' : '');
  }
  return [...new Map(found.map((f) => [`${f.code} ${f.subject}`, f])).values()];
}

function settingFindings(settings: StressStrainSettings, selected: SelectedRegion, branch: LoadingBranch, channels: RecordChannels): Finding[] {
  const found: Finding[] = [];
  const { region } = settings;
  if (region.by === 'by hand') found.push(finding('WINDOW_BY_HAND', 'axial', `Strain ${region.from} to ${region.to}: ${region.reason}`));
  if (selected.easing > 0) found.push(finding('NO_LINEAR_REGION', 'axial', `The tests of the window were eased ${selected.easing} times`));
  if (branch.loadings > 1) found.push(finding('CYCLES_FOUND', 'record', `${branch.loadings} loadings; rows ${channels.rows[branch.from]! + 1} to ${channels.rows[branch.to]! + 1} were fitted`));
  if (channels.stressFrom === 'stress') found.push(finding('STRESS_FROM_FILE', 'stress', 'The record was fitted on its stress channel'));
  if (channels.transverse === null) found.push(finding('TRANSVERSE_MISSING', 'transverse', 'The record has no transverse channel'));
  if ((selected.fit.transverse?.slope ?? 0) > 0) found.push(finding('TRANSVERSE_SIGN', 'transverse', `Transverse strain grows by ${selected.fit.transverse?.slope.toFixed(3)} of the axial strain`));
  return found;
}

const lineDetail = ({ slope, intercept, slopeUncertainty, correlationCoefficient, residualStandardDeviation, points, lagOne }: Line) =>
  ({ slope, intercept, slopeUncertainty, correlationCoefficient, residualStandardDeviation, points, lagOne });

interface Evaluated {
  readonly channels: RecordChannels;
  readonly loading: LoadingBranch;
  readonly branch: Branch;
  readonly fit: RegionFit;
  readonly bending: number | null;
  readonly area: Term | null;
}

function detailOf(input: StressStrainInput, { channels, loading, branch, fit, bending, area }: Evaluated): StressStrainDetail {
  const row = (i: number) => channels.rows[loading.from + i]!;
  const { strainFrom, strainTo, stressFrom, stressTo } = fit;
  return {
    kind: 'stress-strain', regionKind: input.settings.region.by,
    window: { strainFrom, strainTo, stressFrom, stressTo, rowFrom: row(fit.from), rowTo: row(fit.to) },
    axial: lineDetail(fit.axial), transverse: fit.transverse === null ? null : lineDetail(fit.transverse),
    toeStrain: -fit.axial.intercept / fit.axial.slope, bending, area: area === null ? null : uncertaintyOf(area, 'm²'), compressive: input.record.compressive,
    curve: thinned(channels.axial.mean, channels.stress, CURVE_POINTS),
    residuals: thinned(branch.x.subarray(fit.from, fit.to + 1), fit.axial.residuals, RESIDUAL_POINTS),
    transverseCurve: channels.transverse === null ? [] : thinned(channels.axial.mean, channels.transverse.mean, CURVE_POINTS),
    alternatives: alternativeWindows(branch, loading.rise - loading.from),
  };
}

export interface FittedRecord {
  readonly constants: Readonly<Record<ConstantName, Term | null>>;
  readonly findings: readonly Finding[];
  readonly detail: StressStrainDetail;
}

/** Everything but the propagation of uncertainty. @throws EvaluationRefused as `evaluateStressStrain` */
export function fitRecord(input: StressStrainInput): FittedRecord {
  const sectionModel = new Model();
  const section = crossSection(input, sectionModel);
  const channels = readChannels(input.channels, input.record, section.area?.value ?? null);
  const loading = branchOf(channels);
  const branch = sliced(channels, loading);
  const selected = selectRegion(branch, loading.rise - loading.from, input.settings.region);
  if ('problem' in selected) return refuse('WINDOW_OUTSIDE_RECORD', 'axial', `The window ${selected.problem}`);
  const { fit } = selected;
  if (!(fit.axial.slope > 0)) return refuse('SIGN_REVERSED', 'axial', `The slope in the window is ${(fit.axial.slope / 1e9).toPrecision(3)} GPa`);

  const chord = input.settings.region.by.startsWith('chord');
  const area = channels.stressFrom === 'force' ? section.area : null;
  const inWindow = (values: Float64Array) => stepsOf(values.subarray(fit.from, fit.to + 1));
  const steps = { stress: inWindow(branch.y), axial: inWindow(branch.x), transverse: branch.t === null ? 0 : inWindow(branch.t) };
  const constants = staticConstants({
    // A cross-section that E does not hang on stays out of the budget.
    model: area === null ? new Model() : sectionModel, fit, chord, spread: chord ? { E: 0, nu: 0 } : narrowedSpread(branch, fit), area,
    force: { instrument: input.instruments.force, steps: steps.stress },
    axial: { instrument: input.instruments.axial, gaugeLength: channels.axial.extension ? input.record.axialGaugeLength : null, steps: steps.axial },
    transverse: channels.transverse === null ? null : {
      instrument: input.instruments.transverse, gaugeLength: channels.transverse.extension ? input.record.transverseGaugeLength : null, steps: steps.transverse,
    },
  });
  const bending = bendingPercent(channels.axial, loading.from, loading.from + fit.to);
  const findings = [
    ...section.findings.filter((f) => f.code !== 'READINGS_MISSING'), ...channels.findings, ...recordFindings(channels.time, channels.stress, channels.axial.mean),
    ...settingFindings(input.settings, selected, loading, channels), ...windowFindings(branch, fit, chord, channels.rows.subarray(loading.from)),
    ...stepFindings('stress', steps.stress, fit.stressTo - fit.stressFrom), ...stepFindings('axial strain', steps.axial, fit.strainTo - fit.strainFrom),
    ...stepFindings('transverse strain', steps.transverse, Math.abs(fit.transverse?.slope ?? 0) * (fit.strainTo - fit.strainFrom)),
    ...bendingFindings(bending, input.specimen.materialClass), ...instrumentFindings(input, channels, fit, area),
  ];
  return { constants, findings, detail: detailOf(input, { channels, loading, branch, fit, bending, area: section.area }) };
}

/** Share of the whole that the fit takes; the rest is Monte Carlo. */
const FIT_SHARE = 0.4;

/** E and ν come from the record's slopes, G and K from them. */
export const STATIC_ORIGIN = { E: 'measured', nu: 'measured', G: 'derived', K: 'derived' } as const;

/**
 * @param onProgress told the share done, 0 to 1
 * @throws EvaluationRefused when no result can be given: a channel, unit, gauge length or area is missing, nothing changes, a sign is
 * reversed, or the window lies outside the record
 */
export function evaluateStressStrain(input: StressStrainInput, onProgress: (fraction: number) => void = () => undefined): FitResult {
  const { constants, findings, detail } = fitRecord(input);
  onProgress(FIT_SHARE);
  const result = elasticResult({
    basis: 'static', constants, origin: STATIC_ORIGIN, findings, seed: input.seed,
    onProgress: (fraction) => onProgress(FIT_SHARE + (1 - FIT_SHARE) * fraction),
  });
  return { ...result, detail };
}
