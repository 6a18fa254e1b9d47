import { catalogue } from './catalogue';

/** About instruments and their calibration. */
export const INSTRUMENT_FINDINGS = catalogue({
  OUT_OF_CALIBRATION: { severity: 'warn', why: 'The result is traceable only through an instrument in calibration on the day', action: 'Have the instrument calibrated and judge the effect on this result; the certificate carries the flag' },
  CALIBRATION_MISSING: { severity: 'warn', why: 'Without a calibration the instrument adds no known uncertainty, and the result is not traceable', action: 'Enter the calibration that was in force on the day' },
  INSTRUMENT_MISSING: { severity: 'warn', why: 'A channel without its instrument has no calibration in the budget', action: 'Name the instrument of the channel in the run' },
  OUTSIDE_CALIBRATED_RANGE: { severity: 'warn', why: 'The calibration says nothing outside its range', action: 'Read with an instrument whose range holds the value' },
  REFERENCE_CHECK_OUT_OF_LIMITS: { severity: 'warn', why: 'The instrument did not find a reference piece’s known value since its last good check', action: 'Repeat the check; judge every result since the last good one' },
});
