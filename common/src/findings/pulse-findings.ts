import { catalogue } from './catalogue';

/** About pulse runs. */
export const PULSE_FINDINGS = catalogue({
  VELOCITY_RATIO_IMPOSSIBLE: { severity: 'stop', why: 'v_P/v_S at or below 2/√3 means K ≤ 0, even where E comes out positive', action: 'One arrival is wrong: look at the S arrival first' },
  VELOCITY_RATIO_LOW: { severity: 'warn', why: 'v_P/v_S below √2 means ν < 0', action: 'Look again at both arrivals; give a reason if the material is auxetic' },
  ZERO_TIME_MISSING: { severity: 'stop', why: 'The transit time includes the delay of transducers, couplant and electronics', action: 'Measure the zero time of this wave: face to face, on a reference bar, or over several lengths' },
  ZERO_TIME_OLD: { severity: 'warn', why: 'Delays drift with couplant and temperature', action: 'Measure the zero time on the day of the run' },
  TRANSIT_TIME_NOT_POSITIVE: { severity: 'stop', why: 'The zero time is not shorter than the transit time', action: 'Check that readings and zero time belong to the same wave and unit' },
  ARRIVAL_MISSING: { severity: 'stop', why: 'Without both arrivals there are no two velocities', action: 'Type the transit times, attach the waveform, or set the arrival by hand' },
  ARRIVAL_NOT_FOUND: { severity: 'stop', why: 'No onset stands out of the noise', action: 'Improve the coupling and record again, or set the arrival by hand with a reason' },
  ARRIVAL_UNCERTAIN: { severity: 'warn', why: 'The onset is slow or noisy; different eyes would set it elsewhere', action: 'Look at the trace; average more shots or set the arrival by hand' },
  PICKERS_DISAGREE: { severity: 'warn', why: 'Two ways to find the arrival differ by more than a quarter of a period: a skipped cycle or a precursor', action: 'Look at the trace and set the arrival by hand' },
  ARRIVAL_BY_HAND: { severity: 'note', why: 'A person set this arrival; the reason stands with the settings', action: 'The reviewer looks at the trace' },
  RECORD_CLIPPED: { severity: 'warn', why: 'Samples at full scale hide the amplitude', action: 'Lower the gain and record again' },
  RECORD_COARSE: { severity: 'warn', why: 'Few steps of the converter carry the onset', action: 'Raise the gain or average' },
  TOO_FEW_SAMPLES: { severity: 'warn', why: 'Fewer than ten samples a period leave the onset between samples', action: 'Record with a higher sampling rate' },
  PATH_SHORTER_THAN_WAVELENGTH: { severity: 'warn', why: 'On a path shorter than a wavelength the onset is not that of a travelling wave', action: 'Use a higher frequency or a longer specimen' },
  LATERAL_SIZE_BELOW_WAVELENGTH: { severity: 'warn', why: 'The bulk formulas need a lateral dimension of at least a wavelength; in a thin bar the pulse is slower', action: 'Use a higher frequency, or report with a reason' },
  LATERAL_SIZE_BELOW_FIVE_WAVELENGTHS: { severity: 'note', why: 'Rock practice asks for five wavelengths across the specimen', action: 'Use a higher frequency where the standard followed asks for it' },
  FREQUENCY_MISSING: { severity: 'note', why: 'Without the frequency the wavelength conditions cannot be checked', action: 'Enter the nominal frequency of the transducers' },
  RECOUPLINGS_FEW: { severity: 'note', why: 'One reading tells nothing of the coupling', action: 'Take three to five readings, coupling anew for each' },
});
