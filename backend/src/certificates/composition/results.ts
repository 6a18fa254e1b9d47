/** Results of the determinations, with who did and reviewed what, by which method, from which raw files. */
import type { CertificateResult } from '../rendering/wording';
import { settingsText } from './settings-text';
import type { Work, WorkDetermination, WorkRun } from './work';

type CertifiedRun = CertificateResult['runs'][number];

export function certifiedResults(work: Work): CertificateResult[] {
  return work.determinations.map((determination) => certifiedResult(work, determination));
}

function certifiedResult(work: Work, determination: WorkDetermination): CertificateResult {
  const runs = work.runsOf(determination);
  const [first] = runs;
  const review = work.reviewOf(determination);
  if (first === undefined || review === undefined) throw new Error(`Determination ${determination.id} has no fit or no review`);
  return {
    specimenMark: determination.specimen.mark, basis: determination.basis, result: determination.result, method: first.method,
    runs: runs.map((run) => certifiedRun(work, run)),
    analysedBy: determination.submittedBy ?? determination.composedBy, reviewedBy: review.reviewedBy, reviewedAt: review.at.toISOString(),
    acknowledgements: determination.acknowledgements,
  };
}

function certifiedRun(work: Work, run: WorkRun): CertifiedRun {
  const { number, kind, method, performedAt, performedBy, conditions, softwareVersion } = run;
  return {
    number, kind, methodCode: method.code, methodVersion: method.versionNumber, performedAt: performedAt.toISOString(), performedBy, ...conditions,
    settings: settingsText(run.settings), softwareVersion,
    files: work.filesOf(run).map(({ name, sha256, size }) => ({ name, sha256, size })),
  };
}
