/** Relative change of volume under uniaxial stress. */

/**
 * Exact for strains of any size: ΔV/V = (1 + ε)(1 − νε)² − 1, ε the axial engineering strain, ν the ratio of engineering strains.
 * Small-strain theory, on which K = E/(3(1 − 2ν)) rests, says ε(1 − 2ν). Standard kinematics, re-derived.
 * @returns both, and by how much the first order lies above the exact change
 */
export function volumetricStrain(axial: number, nu: number): { exact: number; firstOrder: number; error: number } {
  // Expanded: (1 + ε)(1 − νε)² − 1 loses half its digits in the subtraction of 1.
  const firstOrder = axial * (1 - 2 * nu);
  const error = axial * axial * (nu * (2 - nu)) - nu * nu * axial ** 3;
  return { exact: firstOrder - error, firstOrder, error };
}
