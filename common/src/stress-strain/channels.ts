/**
 * From raw columns (as in the file, with unit and sign) to SI channels in which loading and the strain along it are positive.
 * Stress is force over the original area, strain extension over the original gauge length; two sensors of one direction are averaged.
 */
import type { Finding } from '../contract/result';
import type { Channel, StressStrainRecord } from '../contract/runs';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding, type FindingCode } from '../findings/findings';
import { unit, type Dimension } from '../quantities/units';

export interface RawChannel {
  readonly channel: Channel;
  readonly unit: string;
  readonly sign: 1 | -1;
  /** As in the file; NaN where a cell could not be read. */
  readonly values: Float64Array;
}

/** One direction of strain, dimensionless: the mean of its sensors, and each of two opposed ones. */
export interface StrainChannel {
  readonly mean: Float64Array;
  readonly pair: readonly [Float64Array, Float64Array] | null;
  /** Measured as an extension, so that the gauge length is an input. */
  readonly extension: boolean;
}

export interface RecordChannels {
  /** Row of the file that each kept row came from. */
  readonly rows: Int32Array;
  readonly time: Float64Array | null;
  /** Pa. */
  readonly stress: Float64Array;
  readonly stressFrom: 'force' | 'stress';
  readonly axial: StrainChannel;
  readonly transverse: StrainChannel | null;
  readonly findings: readonly Finding[];
}

function refuse(code: FindingCode, subject: string, seen: string): never {
  throw new EvaluationRefused([finding(code, subject, seen)]);
}

/** Factor to SI; refused when the unit is unknown or of another kind. */
function factorOf(raw: RawChannel, dimensions: readonly Dimension[]): { factor: number; dimension: Dimension } {
  const found = unit(raw.unit);
  if (found === undefined || !dimensions.includes(found.dimension)) {
    return refuse('UNIT_UNSUITABLE', raw.channel, `The unit "${raw.unit}" of channel ${raw.channel} is not one of ${dimensions.filter((d) => d !== 'none').join(' or ')}`);
  }
  return { factor: found.factor * raw.sign, dimension: found.dimension };
}

const scaled = (values: Float64Array, factor: number): Float64Array => values.map((v) => v * factor);

function strainOf(raw: RawChannel, gaugeLength: number | null): { strain: Float64Array; extension: boolean } {
  const { factor, dimension } = factorOf(raw, ['strain', 'length', 'none']);
  if (dimension !== 'length') return { strain: scaled(raw.values, factor), extension: false };
  if (gaugeLength === null) return refuse('GAUGE_LENGTH_MISSING', raw.channel, `Channel ${raw.channel} is an extension in ${raw.unit}, and no gauge length was given`);
  return { strain: scaled(raw.values, factor / gaugeLength), extension: true };
}

function strainChannel(sensors: readonly (RawChannel | undefined)[], gaugeLength: number | null): StrainChannel | null {
  const [first, second] = sensors.filter((s) => s !== undefined).map((s) => strainOf(s, gaugeLength));
  if (first === undefined) return null;
  if (second === undefined) return { mean: first.strain, pair: null, extension: first.extension };
  const mean = first.strain.map((v, i) => (v + second.strain[i]!) / 2);
  return { mean, pair: [first.strain, second.strain], extension: first.extension || second.extension };
}

function stressOf(force: RawChannel | undefined, stress: RawChannel | undefined, area: number | null): Pick<RecordChannels, 'stress' | 'stressFrom'> {
  if (force !== undefined && area !== null) return { stress: scaled(force.values, factorOf(force, ['force']).factor / area), stressFrom: 'force' };
  if (stress !== undefined) return { stress: scaled(stress.values, factorOf(stress, ['pressure']).factor), stressFrom: 'stress' };
  if (force !== undefined) return refuse('AREA_MISSING', 'force', 'The record gives force, and the cross-section of the specimen was not measured');
  return refuse('CHANNEL_MISSING', 'stress', 'The record has neither a force nor a stress channel');
}

/** Whether a channel runs further below its first value than above it. */
function runsNegative(values: Float64Array): boolean {
  const start = values[0]!;
  let least = start;
  let greatest = start;
  for (const v of values) {
    if (v < least) least = v;
    if (v > greatest) greatest = v;
  }
  return start - least > greatest - start;
}

function transform(channel: StrainChannel, change: (values: Float64Array) => Float64Array): StrainChannel {
  const pair = channel.pair === null ? null : ([change(channel.pair[0]), change(channel.pair[1])] as const);
  return { ...channel, mean: change(channel.mean), pair };
}

/**
 * @param area m², of the measured cross-section; null when it was not measured
 * @throws EvaluationRefused when a channel, unit, gauge length or the area is missing, or no row can be used
 */
export function readChannels(raw: readonly RawChannel[], record: StressStrainRecord, area: number | null): RecordChannels {
  const named = (channel: Channel) => raw.find((c) => c.channel === channel);
  const { stress, stressFrom } = stressOf(named('force'), named('stress'), area);
  const axial = strainChannel([named('axial1'), named('axial2')], record.axialGaugeLength);
  if (axial === null) return refuse('CHANNEL_MISSING', 'axial1', 'The record has no axial extension or strain channel');
  const transverse = strainChannel([named('transverse1'), named('transverse2')], record.transverseGaugeLength);
  const time = named('time');
  const all: RecordChannels = {
    rows: Int32Array.from(stress, (_, i) => i), time: time === undefined ? null : time.values, stress, stressFrom, axial, transverse, findings: [],
  };
  return turned(readable(all), record.compressive);
}

/** Leaves out rows in which a needed cell could not be read. */
function readable(all: RecordChannels): RecordChannels {
  const usable = (row: number) => Number.isFinite(all.stress[row]) && Number.isFinite(all.axial.mean[row]) && (all.transverse === null || Number.isFinite(all.transverse.mean[row]));
  const rows = all.rows.filter(usable);
  if (rows.length < 2) return refuse('RECORD_MISSING', 'record', `${rows.length} of ${all.rows.length} rows hold both stress and axial strain`);
  if (rows.length === all.rows.length) return all;
  const pick = (values: Float64Array) => Float64Array.from(rows, (row) => values[row]!);
  return {
    ...all, rows, time: all.time === null ? null : pick(all.time), stress: pick(all.stress), axial: transform(all.axial, pick),
    transverse: all.transverse === null ? null : transform(all.transverse, pick),
    findings: [...all.findings, finding('ROWS_SKIPPED', 'record', `${all.rows.length - rows.length} of ${all.rows.length} rows could not be read and were left out`)],
  };
}

/** Turns every channel when stress and axial strain both run negative: the slopes keep their sign, and loading becomes positive. */
function turned(all: RecordChannels, compressive: boolean): RecordChannels {
  if (!runsNegative(all.stress) || !runsNegative(all.axial.mean)) return all;
  const turn = (values: Float64Array) => values.map((v) => -v);
  const unexpected = compressive ? '' : ', although the run is not marked as compression';
  return {
    ...all, stress: turn(all.stress), axial: transform(all.axial, turn), transverse: all.transverse === null ? null : transform(all.transverse, turn),
    findings: [...all.findings, finding('SIGNS_TURNED', 'record', `Stress and axial strain both run negative in the file${unexpected}; all channels were turned so that loading is positive`)],
  };
}
