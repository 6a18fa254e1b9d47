import { catalogue } from './catalogue';

/** About the four constants themselves. */
export const CONSTANT_FINDINGS = catalogue({
  NU_OUTSIDE_RANGE: { severity: 'stop', why: 'An isotropic solid has −1 < ν < 0.5; outside it K or G would be negative', action: 'Look at the arrivals, the transverse channel and its sign, and the density' },
  NU_NEGATIVE: { severity: 'warn', why: 'Few materials widen when stretched; a wrong arrival or sign looks the same', action: 'Check the arrivals or the transverse sign; give a reason if the material is auxetic' },
  MODULUS_NOT_POSITIVE: { severity: 'stop', why: 'A stable solid has positive E, G and K', action: 'Look for a wrong arrival, sign or density' },
  CONSTANT_UNBOUNDED: { severity: 'stop', why: 'At ν = 0.5 the formula of K divides by zero; beside it no uncertainty can be given', action: 'Look at the transverse channel and the arrivals; K of such a material must be measured directly' },
  NU_ILL_CONDITIONED: { severity: 'warn', why: 'Near ν = 0.5 the relative uncertainty of K grows as 2ν/(1 − 2ν) times that of ν', action: 'Do not use K from this test without its interval; measure K directly where it matters' },
  MONTE_CARLO_DISAGREES: { severity: 'warn', why: 'The model is not linear enough, or an input not normal enough, for the first-order interval', action: 'State the Monte Carlo interval; the certificate does so' },
  FEW_DEGREES_OF_FREEDOM: { severity: 'note', why: 'A mean of few readings has a t distribution with long tails; ± U counts the readings by effective degrees of freedom, which gives a narrower interval', action: 'Take more readings where the difference matters' },
  MONTE_CARLO_UNSTABLE: { severity: 'note', why: 'The trials ended at their limit before the interval ends settled', action: 'Read the last figure of the interval with care' },
  FITS_DISAGREE: { severity: 'warn', why: 'Two adopted fits of the same specimen differ by more than the uncertainty of their difference', action: 'Find which run is at fault; void it, or give a reason' },
  CONSTANT_MISSING: { severity: 'note', why: 'The run measured too little to determine this constant', action: 'Add a transverse channel or a pulse run if the customer wants it' },
});
