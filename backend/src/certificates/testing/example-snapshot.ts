/** An invented certificate for the tests of rendering: an aluminium bar by pulse and a granite core by load and strain. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { BudgetLine, ElasticResult, PerConstant } from '@strainwright/common/contract/result';
import type { ConstantName } from '@strainwright/common/contract/vocabulary';
import type { CertificateResult, CertificateSpecimen } from '../rendering/wording';

const IDENTITY = [0, 1, 2, 3].map((row) => [0, 1, 2, 3].map((column) => (row === column ? 1 : row + column === 1 ? -0.412 : 0.25)));

const modulus = (value: number, u: number, origin: 'measured' | 'derived') => ({
  value, standardUncertainty: u, expandedUncertainty: 2.02 * u, coverageFactor: 2.02, degreesOfFreedom: 41.7, interval: { low: value - 2 * u, high: value + 2 * u }, unit: 'Pa' as const, origin,
});

function budgetLine(input: string, label: string, unit: string, value: number, contribution: PerConstant<number | null>): BudgetLine {
  return { input, label, value, unit, standardUncertainty: value * 1e-3, type: 'B', distribution: 'normal', degreesOfFreedom: null, source: 'calibration certificate', sensitivity: { E: 2 * value, nu: 0.1, G: value, K: value }, contribution };
}

/** @param disagree a constant whose first-order uncertainty Monte Carlo does not bear out */
export function exampleResult(basis: 'static' | 'dynamic', disagree?: ConstantName): ElasticResult {
  const check = (constant: ConstantName) => ({ lowDifference: 1e6, highDifference: 1e6, tolerance: 5e6, agrees: constant !== disagree });
  const nu = { value: 0.3417, standardUncertainty: 0.0024, expandedUncertainty: 0.0048, coverageFactor: 2, degreesOfFreedom: null, interval: { low: 0.3369, high: 0.3465 }, unit: '1' as const, origin: basis === 'static' ? 'measured' as const : 'derived' as const };
  return {
    basis,
    constants: { E: modulus(70.312e9, 0.452e9, basis === 'static' ? 'measured' : 'derived'), nu, G: modulus(26.2e9, 0.12e9, basis === 'static' ? 'derived' : 'measured'), K: modulus(74.04e9, 0.83e9, 'derived') },
    correlation: IDENTITY,
    budget: [
      budgetLine('length.calibration', 'length, calibration of the micrometer', 'm', 0.05, { E: 12, nu: 0, G: 12, K: 12 }),
      budgetLine('time.P.zero', 'zero time of P', 's', 8e-6, { E: 61, nu: 70, G: 2, K: 60 }),
      budgetLine('mass.calibration', 'mass, calibration of the balance', 'kg', 0.1364, { E: 27, nu: 30, G: 86, K: 28 }),
    ],
    monteCarlo: { trials: 200_000, seed: 42, agrees: disagree === undefined, comparison: { E: check('E'), nu: check('nu'), G: check('G'), K: check('K') } },
    findings: [],
  };
}

function specimen(mark: string, material: string): CertificateSpecimen {
  return {
    mark, sampleMark: mark.split('-')[0] ?? mark, material, materialClass: 'metal', shape: 'cylinder', orientation: 'axis along rolling direction', moisture: 'not applicable', condition: 'clean, ends ground',
    receivedOn: '2026-02-16', sampledOn: null, sampledBy: '',
    dimensions: [
      { quantity: 'length', mean: 0.050021, standardUncertainty: 1.9e-6, n: 4, unit: 'm' },
      { quantity: 'diameter', mean: 0.035993, standardUncertainty: 3.4e-6, n: 6, unit: 'm' },
      { quantity: 'mass', mean: 0.137412, standardUncertainty: 1.4e-5, n: 2, unit: 'kg' },
    ],
    density: { value: 2699.7, standardUncertainty: 0.72, degreesOfFreedom: 12, unit: 'kg/m³' },
  };
}

const PULSE_METHOD = { code: 'CB-UP-1', versionNumber: 3, name: 'Pulse velocities through a specimen', standard: 'Settings after ASTM E494', kind: 'pulse' as const };
const LOAD_METHOD = { code: 'CB-SS-2', versionNumber: 1, name: 'Modulus from load and strain', standard: 'Settings after ASTM E111', kind: 'stress-strain' as const };

function result(mark: string, basis: 'static' | 'dynamic', run: number): CertificateResult {
  const pulse = basis === 'dynamic';
  const method = pulse ? PULSE_METHOD : LOAD_METHOD;
  return {
    specimenMark: mark, basis, result: exampleResult(basis),
    method,
    runs: [{
      number: run, kind: method.kind, methodCode: method.code, methodVersion: method.versionNumber, performedAt: '2026-02-20T23:30:00.000Z', performedBy: 'Tamsin Oake', temperature: 22.5, humidity: 41, notes: '',
      settings: pulse ? 'picker AIC' : 'region automatic', softwareVersion: '0.1.0',
      files: [{ name: `${mark}-run${run}.csv`, sha256: 'c'.repeat(64), size: 48_112 }],
    }],
    analysedBy: 'Idris Vale', reviewedBy: 'Maren Holt', reviewedAt: '2026-02-24T09:12:00.000Z', acknowledgements: [],
  };
}

/** @param marks one specimen each, tested both ways */
export function exampleSnapshot(marks: readonly string[] = ['S1-01'], material = 'Aluminium alloy AL-7'): CertificateSnapshot {
  return {
    schema: 'strainwright-certificate-1', number: 'C-2026-0042', issue: 1, replaces: null, title: 'Certificate of elastic constants',
    laboratory: { name: 'Corrie Bank Materials Laboratory', address: '4 Kiln Row, Corrie Bank', timeZone: 'Europe/Berlin', separationOfDuties: true },
    customer: { name: 'Fennick Rotors', address: 'Unit 9, Tarn Works' },
    order: { number: '2026-0147', customerReference: 'FR/88-A', materialDescription: 'Two bars of rolled aluminium alloy, batch AL-7' },
    issuedAt: '2026-02-25T14:05:00.000Z', releasedBy: 'Odile Brandt',
    specimens: marks.map((mark) => specimen(mark, material)),
    results: marks.flatMap((mark) => [result(mark, 'dynamic', 1), result(mark, 'static', 2)]),
    methods: [PULSE_METHOD, LOAD_METHOD],
    instruments: [
      { name: 'Micrometer M-3', kind: 'micrometer', serial: '88121', certificate: 'CAL-2025-117', calibratedOn: '2025-11-03', dueOn: '2026-11-03', inCalibration: true },
      { name: 'Balance B-1', kind: 'balance', serial: 'B1-0042', certificate: 'CAL-2025-031', calibratedOn: '2025-01-20', dueOn: '2026-01-20', inCalibration: false },
    ],
    conformity: [{ specimenMark: marks[0] ?? '', basis: 'static', constant: 'E', lower: 68e9, upper: null, rule: 'guard band', conforms: true, probability: 0.99996, statement: 'E of 70.31 GPa with U 0.91 GPa lies above the lower limit of 68 GPa by more than U.' }],
    deviations: '', statements: ['The results relate only to the items tested.', 'Static and dynamic constants are not interchangeable.'],
    verification: { url: 'https://lab.example/verify', code: '7K3M-Q8RD-0V5T' },
  };
}
