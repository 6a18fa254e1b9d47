/** The four constants as terms of a measurement model. */
import type { Term } from '../uncertainty/model';
import type { ConstantName } from '../contract/vocabulary';

/** Dynamic: G = ρ v_S², K = ρ(v_P² − 4v_S²/3), E = 9KG/(3K + G), ν = (3K − 2G)/(6K + 2G). K never comes from a rounded ν. */
export function constantsOfVelocities(density: Term, vP: Term, vS: Term): Record<ConstantName, Term> {
  const squareP = vP.power(2);
  const squareS = vS.power(2);
  const difference = squareP.minus(squareS);
  return {
    // E and ν in the velocities themselves: ν free of the density, and of the length that both velocities share.
    E: density.times(squareS).times(squareP.times(3).minus(squareS.times(4))).over(difference),
    nu: squareP.minus(squareS.times(2)).over(difference.times(2)),
    G: density.times(squareS),
    K: density.times(squareP.minus(squareS.times(4 / 3))),
  };
}

/** Static: G = E/(2(1 + ν)), K = E/(3(1 − 2ν)); null where ν is. */
export function constantsOfEandNu(E: Term, nu: Term | null): Record<ConstantName, Term | null> {
  if (nu === null) return { E, nu: null, G: null, K: null };
  return { E, nu, G: E.over(nu.plus(1).times(2)), K: E.over(nu.times(-2).plus(1).times(3)) };
}
