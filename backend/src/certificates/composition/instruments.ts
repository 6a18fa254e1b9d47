/** Instruments behind the results, each with the calibration in force when it was used. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { asc, inArray } from 'drizzle-orm';
import type { Queries } from '../../database/database';
import { calibrations, instruments } from '../../database/schema/instruments';
import { inForce } from '../../instruments/calibration-state';
import { dayIn } from '../../laboratory/laboratory-day';
import type { MeasuredSpecimen } from './specimens';
import type { Work } from './work';

type CertifiedInstrument = CertificateSnapshot['instruments'][number];
interface Use {
  readonly id: string;
  /** In the laboratory. */
  readonly day: string;
}

export async function certifiedInstruments(db: Queries, work: Work, specimens: readonly MeasuredSpecimen[], timeZone: string): Promise<CertifiedInstrument[]> {
  const uses = allUses(work, specimens, dayIn(timeZone));
  const ids = [...new Set(uses.map((use) => use.id))];
  if (ids.length === 0) return [];
  const rows = await db.select().from(instruments).where(inArray(instruments.id, ids)).orderBy(asc(instruments.name));
  const all = await db.select().from(calibrations).where(inArray(calibrations.instrumentId, ids)).orderBy(asc(calibrations.calibratedOn));
  return rows.flatMap((row) => {
    const days = uses.filter((use) => use.id === row.id).map((use) => use.day);
    return calibrationsUsed(all.filter((c) => c.instrumentId === row.id), days).map(({ calibration, lastDay }) => ({
      name: row.name, kind: row.kind, serial: row.serial, certificate: calibration?.certificate ?? '',
      calibratedOn: calibration?.calibratedOn ?? null, dueOn: calibration?.dueOn ?? null, inCalibration: calibration !== undefined && lastDay <= calibration.dueOn,
    }));
  });
}

function allUses(work: Work, specimens: readonly MeasuredSpecimen[], dayOf: (instant: Date) => string): Use[] {
  const inRuns = work.determinations.flatMap((d) => work.runsOf(d)).flatMap((run) => Object.values(run.instruments).map((id) => ({ id, day: dayOf(run.performedAt) })));
  const inReadings = specimens.flatMap((s) => s.readings.map((r) => ({ id: r.instrument.id, day: dayOf(new Date(r.readAt)) })));
  return [...inRuns, ...inReadings];
}

/** One line for each calibration that was in force on a day of use, with the last such day. */
function calibrationsUsed<C extends { calibratedOn: string; enteredAt: Date }>(of: readonly C[], days: readonly string[]): { calibration: C | undefined; lastDay: string }[] {
  const used = new Map<C | undefined, string>();
  for (const day of [...days].sort()) used.set(inForce(of, day), day);
  return [...used].map(([calibration, lastDay]) => ({ calibration, lastDay }));
}
