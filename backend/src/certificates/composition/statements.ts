/** Statements and cautions that stand on every certificate. */
export const STATEMENTS: readonly string[] = [
  'The results relate only to the items tested, as received and in the condition stated.',
  'This certificate may not be reproduced except in full without the laboratory’s written approval.',
  'Static and dynamic constants are measured differently and are not interchangeable; neither is computed from the other here.',
  'Constants marked derived follow from the measured ones for an isotropic, linear elastic material; whether the material is one was not part of the work.',
  'Expanded uncertainties are rounded to two significant digits and values to the same place, ties to the even digit.',
  'All tests were made by the laboratory; no result comes from another provider.',
  'Values hold for the specimens as tested. Their use in design belongs to a qualified engineer, by the code that applies.',
  'Testing involves presses, stored energy, flying fragments and coupling agents. Whoever repeats it follows the standard, local rules and licensed practice.',
];
