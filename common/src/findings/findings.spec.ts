import { finding as schema } from '../contract/result';
import { CONSTANT_FINDINGS } from './constant-findings';
import { EvaluationRefused } from './evaluation-refused';
import { finding, hasStop, type FindingCode } from './findings';
import { INSTRUMENT_FINDINGS } from './instrument-findings';
import { PULSE_FINDINGS } from './pulse-findings';
import { RECORD_FINDINGS } from './record-findings';
import { SPECIMEN_FINDINGS } from './specimen-findings';

const TOPICS = [CONSTANT_FINDINGS, INSTRUMENT_FINDINGS, PULSE_FINDINGS, RECORD_FINDINGS, SPECIMEN_FINDINGS];
const codes = TOPICS.flatMap((topic) => Object.keys(topic)) as FindingCode[];

describe('findings', () => {
  it('has one entry for each code', () => {
    expect(new Set(codes).size).toBe(codes.length);
  });

  it.each(codes)('%s says why it matters and what to do', (code) => {
    const said = schema.parse(finding(code, 'length', 'seen 12 mm'));
    expect(code).toMatch(/^[A-Z][A-Z_]+[A-Z]$/);
    for (const text of [said.why, said.action]) {
      expect(text.length).toBeGreaterThan(10);
      expect(text).not.toMatch(/[.!]$/);
    }
  });

  // The weights that the laboratory's rules hang on: a stop blocks, a warning passes only with a reason.
  it.each<[FindingCode, string]>([
    ['VELOCITY_RATIO_IMPOSSIBLE', 'stop'], ['NU_OUTSIDE_RANGE', 'stop'], ['ZERO_TIME_MISSING', 'stop'], ['GAUGE_LENGTH_MISSING', 'stop'], ['READINGS_MISSING', 'stop'], ['MODULUS_NOT_POSITIVE', 'stop'],
    ['NU_NEGATIVE', 'warn'], ['VELOCITY_RATIO_LOW', 'warn'], ['ZERO_TIME_OLD', 'warn'], ['OUT_OF_CALIBRATION', 'warn'], ['OUTSIDE_CALIBRATED_RANGE', 'warn'], ['DENSITY_OUTSIDE_CLASS', 'warn'], ['UNIT_SUSPECT', 'warn'],
    ['LAYOUT_NOT_CONFIRMED', 'warn'], ['MONTE_CARLO_DISAGREES', 'warn'], ['REPLICATE_OUTLIER', 'warn'], ['FITS_DISAGREE', 'warn'], ['REFERENCE_CHECK_OUT_OF_LIMITS', 'warn'], ['TRANSVERSE_MISSING', 'note'],
  ])('%s is a %s', (code, severity) => {
    expect(finding(code, 'x', 'y').severity).toBe(severity);
  });

  it('knows whether anything stops', () => {
    expect(hasStop([finding('NU_NEGATIVE', 'nu', 'y'), finding('ZERO_TIME_MISSING', 'P', 'y')])).toBe(true);
    expect(hasStop([finding('NU_NEGATIVE', 'nu', 'y')])).toBe(false);
    expect(hasStop([])).toBe(false);
  });

  it('a refusal says what was seen and what to do', () => {
    expect(new EvaluationRefused([finding('GAUGE_LENGTH_MISSING', 'axial', 'No axial gauge length')]).message).toBe('No axial gauge length. Enter the gauge length in the run');
  });
});
