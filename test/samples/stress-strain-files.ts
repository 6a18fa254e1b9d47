/** Samples of load and strain, each in the layout of another frame. */
import type { SyntheticRecord } from '@strainwright/common/stress-strain/synthetic-record';
import { areaOf, cyclesOf, recordOf, runOf } from './made-records';
import { at, clock, comma, converted, dayTime, stopwatch, typeset, workbook, type Cell } from './writing';

const LBF = 0.45359237 * 9.80665;
const PSI = LBF / 0.0254 ** 2;

const rows = (record: SyntheticRecord, line: (i: number) => string) => Array.from(record.time, (_, i) => line(i));
const micro = (values: Float64Array, i: number, digits = 2) => (at(values, i) * 1e6).toFixed(digits);

/** What a sample file holds. */
export type Content = string | Uint8Array | Promise<Uint8Array>;

function graniteCore(): Content {
  const r = recordOf(runOf('granite-core.csv'), 11, { peakStress: 70e6, toe: { strain: 60e-6, stress: 3e6 } });
  return Buffer.from(['Zeit [s];Kraft [kN];Dehnung längs [µm/m];Dehnung quer [µm/m]', ...rows(r, (i) => [comma(at(r.time, i), 2), comma(-at(r.force, i) / 1e3, 4), comma(-at(r.axial1, i) * 1e6, 2), comma(-at(r.transverse, i) * 1e6, 2)].join(';'))].join('\r\n'), 'latin1');
}

function concreteCylinder(): Content {
  const r = recordOf(runOf('concrete-cylinder.tsv'), 12, { peakStress: 13e6, bending: 0.04 });
  return Buffer.from(`\ufeff${['Clock\tLoad\tSG1 axial\tSG2 axial\tSG3 lateral', 'hh:mm:ss\tkN\tµε\tµε\tµε', ...rows(r, (i) => [clock(at(r.time, i)), (at(r.force, i) / 1e3).toFixed(3), micro(r.axial1, i), micro(r.axial2, i), micro(r.transverse, i)].join('\t'))].join('\r\n')}`, 'utf16le');
}

function aluminiumTension(): Content {
  const r = recordOf(runOf('aluminium-tension.csv'), 13, { peakStress: 160e6, knee: { stress: 130e6, curvature: 4e-9 } });
  const head = ['Tensile test', 'Operator,TO', 'Specimen,AL-2', 'Rate,0.5 mm/min', 'Grip,wedge', 'Cell,50 kN', 'Extensometer,EX-2', 'Lateral,EX-5', 'Temperature,23', 'Humidity,45', 'Comment,second pull', ''];
  return [...head, 'Time (s),Load (kN),Extension (mm),Transverse (mm)', ...rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / 1e3).toFixed(5), (at(r.axial1, i) * 50).toFixed(6), (at(r.transverse, i) * 12.5).toFixed(7)].join(','))].join('\n');
}

function nickelTension(): Content {
  const r = recordOf(runOf('nickel-tension.txt'), 14, { peakStress: 250e6, rows: 900 });
  return ['Time|Load|Extension|Lateral', 's|lbf|in|in', ...rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / LBF).toFixed(3), (at(r.axial1, i) * 2).toFixed(8), (at(r.transverse, i) * 0.5).toFixed(9)].join('|'))].join('\n');
}

function glassStress(): Content {
  const glass = runOf('glass-stress.csv');
  const r = recordOf(glass, 15, { peakStress: 90e6, toe: { strain: 40e-6, stress: 4e6 } });
  return ['Compressive stress (MPa),Axial strain (%),Transverse strain (%)', ...rows(r, (i) => [(at(r.force, i) / areaOf(glass) / 1e6).toFixed(4), (at(r.axial1, i) * 100).toFixed(6), (at(r.transverse, i) * 100).toFixed(6)].join(','))].join('\n');
}

function aluminiumCrosshead(): Content {
  const r = recordOf(runOf('aluminium-crosshead.csv'), 16, { peakStress: 140e6, bending: 0.03 });
  return `\ufeff${['"Time, s","Crosshead (mm)","Force (N)","Strain 1 (µm/m)","Strain 2 (µm/m)","Lateral strain (µm/m)"', ...rows(r, (i) => [at(r.time, i).toFixed(2), (at(r.axial1, i) * 140 + at(r.force, i) * 2e-5).toFixed(5), at(r.force, i).toFixed(2), micro(r.axial1, i), micro(r.axial2, i), micro(r.transverse, i)].join(','))].join('\n')}`;
}

function concreteRepeated(): Content {
  const r = recordOf(runOf('concrete-repeated.txt'), 17, { peakStress: 14e6, bending: 0.05 });
  const head = ['', 'Time/s   Load/kN   Axial1/µε   Axial2/µε   Lateral/µε'];
  const lines = rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / 1e3).toFixed(4), micro(r.axial1, i), micro(r.axial2, i), micro(r.transverse, i)].map((c) => c.padStart(11)).join(' '));
  return ['Compression frame 2', ...head, ...lines.slice(0, 500), ...head, ...lines.slice(500), '', 'End of test, specimen not broken'].join('\r\n');
}

function graniteLong(): Content {
  const granite = runOf('granite-long.csv');
  const r = recordOf(granite, 18, { peakStress: 80e6, rows: 20_000, interval: 0.005 });
  return ['Elapsed time (s),Axial stress (ksi),Axial strain (mm/mm),Lateral strain (mm/mm)', ...rows(r, (i) => [at(r.time, i).toFixed(3), (at(r.force, i) / areaOf(granite) / PSI / 1000).toFixed(5), at(r.axial1, i).toFixed(9), at(r.transverse, i).toFixed(9)].join(','))].join('\n');
}

function nickelWorkbook(): Content {
  const r = recordOf(runOf('nickel-workbook.xlsx'), 19, { peakStress: 240e6, rows: 800, bending: 0.02 });
  const data = Array.from(r.time, (t, i) => [t, at(r.force, i) / 1e3, at(r.axial1, i) * 1e6, at(r.axial2, i) * 1e6, at(r.transverse, i) * 1e6].map((v) => Number(v.toPrecision(8))));
  return workbook({ Data: [['Tension, nickel alloy'], [], ['Time', 'Load', 'Axial 1', 'Axial 2', 'Transverse'], ['s', 'kN', 'µε', 'µε', 'µε'], ...data] });
}

function concreteCycles(): Content {
  const r = cyclesOf(runOf('concrete-cycles.csv'), 20, 3, { peakStress: 12e6, rows: 500, interval: 0.2, bending: 0.06 });
  const head = ['sep=;', 'Versuch;Druck-E-Modul', 'Index;Datum;Uhrzeit;Kraft Soll;Kraft;DMS 1 axial;DMS 2 axial;Mittelwert;DMS 3 quer;Volumendehnung;Status', '-;-;hh:mm:ss;kN;kN;µm/m;µm/m;µm/m;µm/m;µm/m;-'];
  const line = (i: number) => {
    const [a, b, q] = [r.axial1, r.axial2, r.transverse].map((values) => converted(at(values, i) * 1e6, 2000, 12)) as [number, number, number];
    const mean = (a + b) / 2;
    const force = converted(at(r.force, i) / 1e3, 250, 14);
    return [i + 1, '01.06.2026', clock(at(r.time, i)).replace('.', ','), comma(force, 2), comma(force, 3), comma(a, 2), comma(b, 2), comma(mean, 2), comma(q, 2), comma(mean + 2 * q, 2), i === 0 ? 'START' : 'OK'].join(';');
  };
  return Buffer.from([...head, ...rows(r, line), '', 'Ende;Bruchlast nicht bestimmt'].join('\r\n'), 'utf8');
}

function graniteAmounts(): Content {
  const granite = runOf('granite-amounts.txt');
  const r = recordOf(granite, 23, { peakStress: 75e6, rows: 900 });
  const head = ['Triaxial cell\tCell 2', 'Core\tG-14', '', 'Time [s]\tConfining pressure [MPa]\tAxial stress [MPa]\tAxial strain [mm/m]\tLateral strain [mm/m]'];
  const text = [...head, ...rows(r, (i) => [comma(at(r.time, i), 1), '0,00', comma(at(r.force, i) / areaOf(granite) / 1e6, 4), comma(at(r.axial1, i) * 1e3, 6), comma(-at(r.transverse, i) * 1e3, 6)].join('\t'))].join('\r\n');
  return Buffer.from(`\ufeff${text}`, 'utf16le').swap16();
}

function aluminiumQuoted(): Content {
  const r = recordOf(runOf('aluminium-quoted.csv'), 24, { peakStress: 150e6, knee: { stress: 120e6, curvature: 3e-9 }, rows: 1000 });
  const quoted = (cells: readonly string[]) => cells.map((c) => `"${c}"`).join(',');
  return Buffer.from([quoted(['Time (s)', 'Extension (mm)', 'Load (N)', 'Tensile strain (Axial) (%)', 'Transverse strain (%)']),
    ...rows(r, (i) => quoted([comma(at(r.time, i), 1), comma(at(r.axial1, i) * 130 + at(r.force, i) * 3e-5, 5), comma(at(r.force, i), 2), comma(at(r.axial1, i) * 100, 6), comma(at(r.transverse, i) * 100, 6)]))].join('\n'), 'utf16le');
}

function nickelBlocks(): Content {
  const r = recordOf(runOf('nickel-blocks.txt'), 25, { peakStress: 300e6, toe: { strain: 80e-6, stress: 8e6 }, knee: { stress: 240e6, curvature: 2e-9 }, rows: 1000 });
  const header = ['Essai de traction', ...Array.from({ length: 29 }, (_, i) => `Paramètre ${i + 1} : ${(i * 7) % 11}`)];
  const page = ['Temps  Déplacement traverse     Force  Déformation axiale  Déformation transversale', '-----  --------------------  --------  ------------------  ------------------------', 'mm:ss                    mm       daN                  mm                        mm'];
  const lines = rows(r, (i) => `${stopwatch(at(r.time, i))}  ${typeset(at(r.axial1, i) * 120 + at(r.force, i) * 2e-5, 4).padStart(20)}  ${typeset(at(r.force, i) / 10, 3).padStart(8)}  ${typeset(at(r.axial1, i) * 25, 7).padStart(18)}  ${typeset(at(r.transverse, i) * 10, 7).padStart(24)}`);
  const pages = Array.from({ length: 5 }, (_, k) => ['', `Page ${k + 1}`, '', ...page, ...lines.slice(200 * k, 200 * (k + 1))]);
  return [...header, ...pages.flat(), '', "Fin de l'essai"].join('\r\n');
}

function glassSheets(): Content {
  const r = recordOf(runOf('glass-sheets.xlsx'), 26, { peakStress: 85e6, rows: 800, bending: 0.03 });
  const twin = recordOf(runOf('glass-sheets.xlsx'), 27, { peakStress: 85e6, rows: 800 });
  const strain = (values: Float64Array, i: number) => Number((-at(values, i) * 1e6).toFixed(3));
  const data = Array.from(r.time, (t, i): Cell[] => [dayTime(t), Number((-at(r.force, i) / 1e3).toFixed(5)), strain(r.axial1, i), strain(r.axial2, i), strain(r.transverse, i), strain(twin.transverse, i)]);
  return workbook({
    Parameters: [['Specimen', 'GL-3'], ['Width', 20, 'mm'], ['Thickness', 20, 'mm'], ['Cell', 100, 'kN']],
    Data: [['Time', 'Load (kN)', 'Gauge 1 (µε)', 'Gauge 2 (µε)', 'Gauge 3 (µε)', 'Gauge 4 (µε)'], ...data],
    Results: [['Largest load', 34.0, 'kN']],
  }, ['Data']);
}

export const STRESS_STRAIN_FILES: Readonly<Record<string, () => Content>> = {
  'granite-core.csv': graniteCore, 'concrete-cylinder.tsv': concreteCylinder, 'aluminium-tension.csv': aluminiumTension, 'nickel-tension.txt': nickelTension,
  'glass-stress.csv': glassStress, 'aluminium-crosshead.csv': aluminiumCrosshead, 'concrete-repeated.txt': concreteRepeated, 'granite-long.csv': graniteLong, 'nickel-workbook.xlsx': nickelWorkbook,
  'concrete-cycles.csv': concreteCycles, 'granite-amounts.txt': graniteAmounts, 'aluminium-quoted.csv': aluminiumQuoted, 'nickel-blocks.txt': nickelBlocks, 'glass-sheets.xlsx': glassSheets,
};
