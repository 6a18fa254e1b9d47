import type { Finding } from '../contract/result';

/** Thrown where no result can be given at all; the findings say why. */
export class EvaluationRefused extends Error {
  constructor(readonly findings: readonly Finding[]) {
    super(findings.map((f) => `${f.seen}. ${f.action}`).join(' '));
    this.name = 'EvaluationRefused';
  }
}
