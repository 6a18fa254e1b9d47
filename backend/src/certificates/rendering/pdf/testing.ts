/** How it was tested: methods, runs with their conditions and settings, instruments, raw files. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { Content } from 'pdfmake/interfaces';
import { KIND_NAMES, momentOf, type CertificateResult } from '../wording';
import { heading, QUIET, ruledTable, STOP } from './style';

type Run = CertificateResult['runs'][number];

export function testing(snapshot: CertificateSnapshot): Content[] {
  return [heading('Methods'), ...methods(snapshot), heading('Tests and conditions'), runs(snapshot), heading('Instruments'), ...instruments(snapshot)];
}

function methods(snapshot: CertificateSnapshot): Content[] {
  return snapshot.methods.map((m) => ({
    fontSize: 8.5, margin: [0, 1, 0, 2],
    text: [{ text: `${m.code} version ${m.versionNumber}`, font: 'RobotoMono', fontSize: 8 }, `  ${m.name} (${KIND_NAMES[m.kind]} method). `, { text: m.standard, color: QUIET }],
  }));
}

export function conditionsText(run: Run): string {
  const parts = [
    run.temperature === null ? 'temperature not recorded' : `${run.temperature} °C`,
    run.humidity === null ? 'humidity not recorded' : `${run.humidity} % relative humidity`,
    run.notes,
  ];
  return parts.filter((p) => p !== '').join('; ');
}

function runs(snapshot: CertificateSnapshot): Content {
  return ruledTable(
    [{ head: 'Specimen, run', width: 82 }, { head: 'Method', width: 58 }, { head: 'Tested', width: 74 }, { head: 'By', width: 62 }, { head: 'Conditions', width: '*' }, { head: 'Settings of the evaluation', width: '*' }],
    snapshot.results.flatMap((r) => r.runs.map((run) => [
      { text: `${r.specimenMark}, ${run.number}`, style: 'number' },
      { text: `${run.methodCode} v${run.methodVersion}`, style: 'number', fontSize: 7.2 },
      { text: momentOf(run.performedAt, snapshot.laboratory.timeZone), style: 'number', fontSize: 7.2 },
      run.performedBy, conditionsText(run), `${run.settings}; software ${run.softwareVersion}`,
    ])),
  );
}

function instruments(snapshot: CertificateSnapshot): Content[] {
  const lapsed = snapshot.instruments.filter((i) => !i.inCalibration);
  return [
    ruledTable(
      [{ head: 'Instrument', width: '*' }, { head: 'Serial', width: 86 }, { head: 'Calibration certificate', width: 110 }, { head: 'Calibrated', width: 56 }, { head: 'Due', width: 56 }, { head: 'On the day', width: 74 }],
      snapshot.instruments.map((i) => [
        `${i.name} (${i.kind})`, { text: i.serial, style: 'number', fontSize: 7.2 }, i.certificate === '' ? '–' : i.certificate,
        { text: i.calibratedOn ?? '–', style: 'number', fontSize: 7.2 }, { text: i.dueOn ?? '–', style: 'number', fontSize: 7.2 },
        i.inCalibration ? 'in calibration' : { text: '■ OUT of calibration', bold: true, color: STOP },
      ]),
    ),
    ...(lapsed.length === 0 ? [] : [{ text: `Out of calibration on a day of use: ${lapsed.map((i) => i.name).join(', ')}. The results that rest on it carry the finding and the reason for which it was accepted.`, style: 'note', color: STOP }]),
  ];
}

/** Raw records by name and SHA-256, so that each result can be traced to the bytes it came from. */
export function rawFiles(snapshot: CertificateSnapshot): Content[] {
  const rows = snapshot.results.flatMap((r) => r.runs.flatMap((run) => run.files.map((file) => [
    { text: `${r.specimenMark}, ${run.number}`, style: 'number', fontSize: 7.2 }, { text: file.name, fontSize: 7.5 }, { text: file.sha256, font: 'RobotoMono', fontSize: 6.2 },
  ])));
  if (rows.length === 0) return [];
  return [heading('Raw records'), ruledTable([{ head: 'Specimen, run', width: 82 }, { head: 'File', width: '*' }, { head: 'SHA-256', width: 244 }], rows)];
}
