import { catalogue } from './catalogue';

/** About readings of the specimen. */
export const SPECIMEN_FINDINGS = catalogue({
  READINGS_MISSING: { severity: 'stop', why: 'The constants need every dimension and, for a pulse run, the mass', action: 'Enter the missing readings' },
  READING_NOT_POSITIVE: { severity: 'stop', why: 'A dimension or mass of zero or less is a slip', action: 'Correct the reading' },
  WEIGHING_IMPOSSIBLE: { severity: 'stop', why: 'A specimen weighs less in water than in air, and the formula of water holds from 0 to 40 °C', action: 'Check which mass is which, and the water temperature and its unit' },
  READINGS_FEW: { severity: 'note', why: 'One reading tells nothing of how uniform the specimen is', action: 'Read at three stations or more' },
  DENSITY_OUTSIDE_CLASS: { severity: 'warn', why: 'A wrong density spoils E, G and K alike without looking wrong', action: 'Check mass, dimensions and their units, and the material class' },
  DENSITIES_DISAGREE: { severity: 'warn', why: 'Density by dimensions and in water differ by more than their uncertainties', action: 'Look for pores, a wrong station or a bubble on the specimen in water' },
  UNIT_SUSPECT: { severity: 'warn', why: 'A factor of 10 or 25.4 is the mark of a wrong unit', action: 'Compare the reading with the instrument and correct its unit' },
  REPLICATE_OUTLIER: { severity: 'warn', why: 'One reading stands apart from the others of its kind', action: 'Read again; correct it with a reason if it was misread' },
  NOT_UNIFORM: { severity: 'note', why: 'The stations differ by more than the instrument explains; the spread is in the budget', action: 'Measure at more stations' },
});
