/** Specimens as the certificate describes them, measured by the readings that the fits rested on. */
import type { Reading } from '@strainwright/common/contract/specimens';
import { measureSpecimen, type ReadingState } from '@strainwright/common/specimens/measure-specimen';
import { uncertaintyOf } from '@strainwright/common/uncertainty/first-order';
import { Model } from '@strainwright/common/uncertainty/model';
import type { Queries } from '../../database/database';
import { readingStates } from '../../readings/measurement';
import { readingsOf } from '../../readings/reading-answer';
import type { CertificateSpecimen } from '../rendering/wording';
import type { Work, WorkDetermination } from './work';

export interface MeasuredSpecimen {
  readonly certified: CertificateSpecimen;
  readonly readings: readonly ReadingState[];
}

export async function measuredSpecimens(db: Queries, work: Work): Promise<MeasuredSpecimen[]> {
  const firstOfEach = [...new Map(work.determinations.map((d) => [d.specimenId, d])).values()];
  const all = await readingsOf(db, firstOfEach.map((d) => d.specimenId));
  const measured: MeasuredSpecimen[] = [];
  for (const determination of firstOfEach) {
    const readings = standingAt(all.filter((r) => r.specimenId === determination.specimenId), lastFitOf(work, determination.specimenId));
    const states = await readingStates(db, readings);
    measured.push({ certified: certifiedSpecimen(determination, states), readings: states });
  }
  return measured;
}

/** When the last of the specimen's fits took its inputs. */
function lastFitOf(work: Work, specimenId: string): string {
  const starts = work.determinations.filter((d) => d.specimenId === specimenId).flatMap((d) => work.runsOf(d).map((run) => run.fitStartedAt?.toISOString() ?? ''));
  return starts.sort().at(-1) ?? '';
}

/** Readings as they stood at an instant: what was corrected later stands as it was. */
export function standingAt(readings: readonly Reading[], instant: string): Reading[] {
  const known = readings.filter((r) => r.readAt <= instant);
  const ids = new Set(known.map((r) => r.id));
  return known.map((r) => (r.supersededBy !== null && !ids.has(r.supersededBy) ? { ...r, supersededBy: null } : r));
}

function certifiedSpecimen({ specimen, sample }: WorkDetermination, readings: readonly ReadingState[]): CertificateSpecimen {
  const { statistics, terms, density } = measureSpecimen(new Model(), specimen.shape, sample.materialClass, readings);
  return {
    mark: specimen.mark, sampleMark: sample.mark, material: sample.material, materialClass: sample.materialClass, shape: specimen.shape, orientation: specimen.orientation,
    moisture: specimen.moisture, condition: sample.condition, receivedOn: sample.receivedOn, sampledOn: sample.sampledOn, sampledBy: sample.sampledBy,
    dimensions: statistics.filter((s) => s.unit !== 'K').map((s) => ({
      quantity: DIMENSION_NAMES[s.quantity] ?? s.quantity, mean: terms[s.quantity]?.value ?? s.mean, standardUncertainty: s.standardUncertainty, n: s.n, unit: s.unit,
    })),
    density: density === null ? null : uncertaintyOf(density, 'kg/m³'),
  };
}

const DIMENSION_NAMES: Readonly<Record<string, string>> = { massInWater: 'apparent mass in water' };
