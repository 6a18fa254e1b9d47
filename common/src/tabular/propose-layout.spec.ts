/** Layouts as test frames and pulse units of the world write them (common practice), each proposed unasked or asked about. */
import type { Layout, LayoutProposal } from '../contract/runs';
import { proposeDelimitedLayout, proposeWorkbookLayout, signatureOf } from './propose-layout';

const ROWS = 60;
const steps = Array.from({ length: ROWS }, (_, i) => i);
/** Rows of a test in which loading is positive, at a step of it. */
const record = (i: number) => ({ time: 0.1 * i, force: 0.5 * i, axial: 12.25 * i, lateral: -3.05 * i });

function propose(head: readonly string[], row: (i: number) => string, options: { waveform?: boolean; remembered?: ReadonlyMap<string, Layout>; tail?: readonly string[]; later?: readonly string[] } = {}): LayoutProposal {
  const lines = [...head, ...steps.map(row), ...(options.tail ?? [])];
  return proposeDelimitedLayout(lines, options.later ?? [], 'utf-8', lines.length, { waveform: options.waveform ?? false, ...(options.remembered === undefined ? {} : { remembered: options.remembered }) });
}

const mapped = ({ layout }: LayoutProposal) => layout.columns.map((c) => `${c.channel} ${c.unit} ${c.sign}`.replace(/ignore.*/, 'ignore'));
const cells = (i: number, delimiter: string, decimal = '.') => Object.values(record(i)).map((v) => v.toFixed(3).replace('.', decimal)).join(delimiter);
const HEADINGS = ['Time (s)', 'Load (kN)', 'Axial strain (µε)', 'Lateral strain (µε)'];
const MAPPED = ['time s 1', 'force kN 1', 'axial1 µε 1', 'transverse1 µε 1'];

describe('delimiter and decimal sign', () => {
  it.each([
    [',', '.'], [';', '.'], [';', ','], ['\t', '.'], ['\t', ','], ['|', '.'], ['|', ','], [' ', '.'], [' ', ','],
  ] as const)('%j with decimal %j', (delimiter, decimal) => {
    const proposal = propose([HEADINGS.join(delimiter)], (i) => cells(i, delimiter, decimal));
    expect(proposal.layout).toMatchObject({ delimiter, decimal, headingRow: 0, unitsRow: null, firstDataRow: 1 });
    expect(mapped(proposal)).toEqual(MAPPED);
    expect(proposal.confidence).toBe(1);
  });

  it('reads decimal commas in quotes between commas', () => {
    const proposal = propose([HEADINGS.map((h) => `"${h}"`).join(',')], (i) => Object.values(record(i)).map((v) => `"${v.toFixed(2).replace('.', ',')}"`).join(','));
    expect(proposal.layout).toMatchObject({ delimiter: ',', decimal: ',' });
    expect(mapped(proposal)).toEqual(MAPPED);
  });

  it('reads two columns of decimal commas between blanks as two, not three', () => {
    const proposal = propose(['Stress(MPa) Strain(%)'], (i) => `${(0.5 * i).toFixed(1).replace('.', ',')} ${(0.001 * i).toFixed(4).replace('.', ',')}`);
    expect(proposal.layout).toMatchObject({ delimiter: ' ', decimal: ',' });
    expect(mapped(proposal)).toEqual(['stress MPa 1', 'axial1 % 1']);
  });

  it('refuses commas that part columns and decimals alike', () => {
    expect(() => propose([HEADINGS.join(',')], (i) => cells(i, ',', ','))).toThrow(expect.objectContaining({ code: 'commas-both-ways' }));
  });

  it.each([['1,234.50', ';'], ['1.234,50', ';'], ["1'234.50", ';'], ['1 234,50', '\t'], ['1,234,567', '\t'], ['"1,234.50"', ',']])('refuses thousands separators as in %s', (big, delimiter) => {
    const decimal = /,\d\d$/.test(big) ? ',' : '.';
    expect(() => propose([HEADINGS.join(delimiter)], (i) => cells(i, delimiter, decimal), { tail: [['6.0', big, '700.0', '-180.0'].map((c) => (decimal === ',' && c !== big ? c.replace('.', ',') : c)).join(delimiter)] }))
      .toThrow(expect.objectContaining({ code: 'thousands-separators' }));
  });

  it('asks when every decimal could be thousands', () => {
    const proposal = propose(['Time (s);Load (N);Strain (µε)'], (i) => `${i};${i + 1},${200 + i};${2 * i + 1},${300 + i}`);
    expect(proposal.layout.decimal).toBe(',');
    expect(proposal.confidence).toBeLessThan(0.6);
    expect(proposal.remarks.join(' ')).toMatch(/could be thousands/);
  });

  it('does not ask when a leading zero or another number of digits settles it', () => {
    expect(propose(['Time (s);Load (N);Strain (µε)'], (i) => `${i};${i},${200 + i};${2 * i},${300 + i}`).confidence).toBe(1);
  });

  it('is not misled by a decimal comma that only comes after the head', () => {
    const proposal = propose(['Time (s);Load (N);Strain (µε)'], (i) => `${i};${10 * i};${20 * i}`, { later: ['61;610,5;1220,25', '62;620,5;1240,25', '63;630,5;1260,25'] });
    expect(proposal.layout.decimal).toBe(',');
  });
});

describe('headings and units', () => {
  it.each<[string, string[]]>([
    ['in brackets', ['Time [s];Load [kN];Axial strain [µm/m];Lateral strain [microstrain]']],
    ['in a row of their own', ['Time;Load;Axial strain;Lateral strain', 's;kN;µε;µε']],
    ['in a row of brackets', ['Time;Load;Axial strain;Lateral strain', '[s];[kN];[um/m];[um/m]']],
    ['behind slashes', ['Time/s;Load/kN;Axial/µε;Lateral/µε']],
    ['behind commas and blanks', ['Time, s;Load, kN;Axial strain µε;Lateral strain µε']],
    ['under a ruler', ['Time (s);Load (kN);Axial (µε);Lateral (µε)', '--------;--------;--------;--------']],
    ['above channel numbers', ['Time;Load;Axial;Lateral', 's;kN;µε;µε', 'Ch 1;Ch 2;Ch 3;Ch 4']],
    ['below channel numbers', ['Ch 1;Ch 2;Ch 3;Ch 4', 'Time;Load;Axial;Lateral', 's;kN;µε;µε']],
    ['under a title, an operator and blank lines', ['Compression test', 'Operator;NN', '', 'Time (s);Load (kN);Axial (µε);Lateral (µε)', '']],
    ['with a hint for spreadsheets', ['sep=;', 'Time (s);Load (kN);Axial (µε);Lateral (µε)']],
    ['in German', ['Prüfzeit [s];Kraft [kN];Dehnung längs [µm/m];Dehnung quer [µm/m]']],
    ['in French', ['Temps (s);Force (kN);Déformation axiale (µm/m);Déformation transversale (µm/m)']],
    ['in plain symbols', ['t [s];F [kN];εax [µε];lat. [µε]']],
  ])('%s', (_, head) => {
    const proposal = propose(head, (i) => cells(i, ';'));
    expect(proposal.layout.firstDataRow).toBe(head.length);
    expect(mapped(proposal)).toEqual(MAPPED);
    expect(proposal.confidence).toBe(1);
  });

  it.each([
    ['at two blanks or more', 'Time (s)   Load (kN)   Axial strain (µε)   Lateral strain (µε)', MAPPED],
    ['by bracketed units', 'Time (s) Load (kN) Axial (µε) Lateral (µε)', MAPPED],
  ])('parts headings over columns of blanks %s', (_, head, expected) => {
    expect(mapped(propose([head], (i) => Object.values(record(i)).map((v) => v.toFixed(2).padStart(12)).join('')))).toEqual(expected);
  });

  it('skips a header of metadata in pairs, and footers', () => {
    const head = ['Machine;Frame 3', 'Load cell;100 kN', 'Gauge length;50', 'Rate;0.6 MPa/s', ...Array.from({ length: 26 }, (_, i) => `Parameter ${i};${i}`), HEADINGS.join(';')];
    const proposal = propose(head, (i) => cells(i, ';'), { tail: ['', 'Max load;29.5', 'End of test'] });
    expect(proposal.layout).toMatchObject({ headingRow: 30, firstDataRow: 31 });
    expect(mapped(proposal)).toEqual(MAPPED);
  });

  it('skips numbered lines of header that have half as many numbers as the data', () => {
    const head = [...Array.from({ length: 20 }, (_, i) => `Parameter ${i} : ${i + 7}`), 'Time(s) Load(kN) Axial(µε) Lateral(µε)'];
    const proposal = propose(head, (i) => cells(i, ' '));
    expect(proposal.layout).toMatchObject({ headingRow: 20, firstDataRow: 21 });
    expect(mapped(proposal)).toEqual(MAPPED);
  });

  it('asks when there are no headings', () => {
    const proposal = propose([], (i) => cells(i, ';'));
    expect(proposal.layout.headingRow).toBeNull();
    expect(proposal.confidence).toBeLessThan(0.6);
    expect(mapped(proposal)[0]).toBe('time s 1');
  });

  it('asks when the headings are in words that it does not know', () => {
    const proposal = propose(['Czas;Siła;Odkształcenie'], (i) => cells(i, ';').split(';').slice(0, 3).join(';'));
    expect(proposal.confidence).toBeLessThan(0.6);
    expect(proposal.remarks.join(' ')).toMatch(/No column of force/);
  });
});

describe('columns to channels', () => {
  const map = (headings: string, values: (i: number) => (number | string)[]) => propose([headings], (i) => values(i).join(';'));

  it.each(['Crosshead (mm)', 'Stroke [mm]', 'Traversenweg [mm]', 'Position (mm)', 'Actuator displacement (mm)', 'Kolbenweg/mm', 'Ram travel (in)'])('never takes %s for strain', (stroke) => {
    const proposal = map(`Time (s);${stroke};Load (kN);Strain (%)`, (i) => [i, 0.01 * i, 0.5 * i, 0.001 * i]);
    expect(mapped(proposal)).toEqual(['time s 1', 'ignore', 'force kN 1', 'axial1 % 1']);
    expect(proposal.remarks.join(' ')).toMatch(/machine's travel/);
    expect(proposal.confidence).toBeGreaterThanOrEqual(0.6);
  });

  it.each(['Crosshead (mm)', 'Displacement (mm)', 'Channel 3 (mm)'])('asks when %s is all there is', (stroke) => {
    const proposal = map(`Time (s);${stroke};Load (kN)`, (i) => [i, 0.01 * i, 0.5 * i]);
    expect(mapped(proposal)).toEqual(['time s 1', 'ignore', 'force kN 1']);
    expect(proposal.confidence).toBeLessThan(0.6);
  });

  it('takes the force of an actuator for a force', () => {
    expect(mapped(map('Actuator force (kN);Axial strain (%)', (i) => [0.5 * i, 0.001 * i]))).toEqual(['force kN 1', 'axial1 % 1']);
  });

  it('leaves out counters, commands, rates, means, volumetric strain, confinement, dates and states', () => {
    const headings = 'Index;Date;Time;Load command (kN);Load (kN);Loading rate (kN/s);Confining pressure (MPa);Axial strain 1 (µε);Axial strain 2 (µε);Mean strain (µε);Radial strain (µε);Volumetric strain (µε);Status';
    const proposal = map(headings, (i) => [i, '01.06.2026', `10:00:${(i % 60).toString().padStart(2, '0')}.5`, 0.5 * i, 0.5 * i, 0.5, 5, 10 * i, 11 * i, 10.5 * i, -3 * i, 4 * i, 'OK']);
    expect(mapped(proposal)).toEqual(['ignore', 'ignore', 'time s 1', 'ignore', 'force kN 1', 'ignore', 'ignore', 'axial1 µε 1', 'axial2 µε 1', 'ignore', 'transverse1 µε 1', 'ignore', 'ignore']);
    expect(proposal.confidence).toBe(1);
  });

  it('takes a mean that stands alone', () => {
    expect(mapped(map('Load (kN);Average strain (µε)', (i) => [0.5 * i, 10 * i]))).toEqual(['force kN 1', 'axial1 µε 1']);
  });

  it('takes strain rather than an extension beside it', () => {
    const proposal = map('Time (s);Extension (mm);Load (N);Strain (%)', (i) => [i, 0.01 * i, 50 * i, 0.001 * i]);
    expect(mapped(proposal)).toEqual(['time s 1', 'ignore', 'force N 1', 'axial1 % 1']);
    expect(proposal.remarks.join(' ')).toMatch(/Extension is an extension beside strain/);
  });

  it('tells transverse gauges from axial ones by their running against the load', () => {
    const proposal = map('Load (kN);SG1 (µε);SG2 (µε);SG3 (µε);SG4 (µε)', (i) => [0.5 * i, -3 * i, 10 * i, -2.9 * i, 10.4 * i]);
    expect(mapped(proposal)).toEqual(['force kN 1', 'transverse1 µε 1', 'axial1 µε 1', 'transverse2 µε 1', 'axial2 µε 1']);
  });

  it('asks when the second gauge reads much less than the first', () => {
    expect(map('Load (kN);Strain 1 (µε);Strain 2 (µε)', (i) => [0.5 * i, 10 * i, 3 * i]).confidence).toBeLessThan(0.6);
  });

  it('asks about a third sensor of one direction', () => {
    const proposal = map('Load (kN);LVDT 1 (mm);LVDT 2 (mm);LVDT 3 (mm)', (i) => [0.5 * i, 0.001 * i, 0.0011 * i, 0.0009 * i]);
    expect(mapped(proposal)).toEqual(['force kN 1', 'axial1 mm 1', 'axial2 mm 1', 'ignore']);
    expect(proposal.confidence).toBeLessThan(0.6);
  });

  it('does not take a transducer for transverse', () => {
    expect(mapped(map('Load (kN);Strain transducer (µε)', (i) => [0.5 * i, 10 * i]))).toEqual(['force kN 1', 'axial1 µε 1']);
  });
});

describe('signs', () => {
  const map = (signs: readonly number[], offset = 0) => propose([HEADINGS.join(';')], (i) => Object.values(record(i)).map((v, k) => (v * (signs[k] ?? 1) + (k > 1 ? offset : 0)).toFixed(3)).join(';'));

  it.each<[string, number[], string[]]>([
    ['loading positive', [1, 1, 1, 1], MAPPED],
    ['compression negative', [1, -1, -1, -1], ['time s 1', 'force kN -1', 'axial1 µε -1', 'transverse1 µε -1']],
    ['load an amount, strains negative in compression', [1, 1, -1, -1], ['time s 1', 'force kN 1', 'axial1 µε -1', 'transverse1 µε -1']],
    ['load negative, shortening positive', [1, -1, 1, 1], ['time s 1', 'force kN -1', 'axial1 µε 1', 'transverse1 µε 1']],
  ])('%s', (_, signs, expected) => {
    expect(mapped(map(signs))).toEqual(expected);
  });

  it('are told by the way, not by where a gauge starts', () => {
    expect(mapped(map([1, 1, 1, 1], -5000))).toEqual(MAPPED);
  });

  it('are told by the whole test, not by its first rows', () => {
    const proposal = propose([HEADINGS.join(';')], (i) => `${i};${(i % 3) - 1}.01;${(i % 3) - 1}.2;0.1`, { later: ['1000;-80.5;-2000.1;500.3', '2000;-150.5;-4000.1;1000.3', '3000;-200.5;-6000.1;1500.3'] });
    expect(mapped(proposal)).toEqual(['time s 1', 'force kN -1', 'axial1 µε -1', 'transverse1 µε -1']);
  });

  it('ask when transverse strain is written as an amount', () => {
    const proposal = map([1, 1, 1, -1]);
    expect(mapped(proposal)).toEqual(['time s 1', 'force kN 1', 'axial1 µε 1', 'transverse1 µε -1']);
    expect(proposal.confidence).toBeLessThan(0.6);
    expect(proposal.remarks.join(' ')).toMatch(/negative/);
  });
});

describe('units', () => {
  const unitOf = (heading: string, factor: number) => {
    const proposal = propose([`Load (kN);${heading}`], (i) => `${0.5 * i};${(factor * i).toPrecision(6)}`);
    return { unit: proposal.layout.columns[1]?.unit, confidence: proposal.confidence, remarks: proposal.remarks.join(' ') };
  };

  it.each([['Strain', 20, 'µε'], ['Strain', 0.01, '%'], ['Strain', 1e-5, 'mm/mm']])('proposes and asks about %s without a unit, by its size', (heading, factor, unit) => {
    expect(unitOf(heading, factor)).toMatchObject({ unit, confidence: 0.5 });
  });

  it.each([['Strain (mm/mm)', 20, /goes? to|go to/], ['Strain (µε)', 1e-5, /no strain/]])('asks about %s with numbers of another unit', (heading, factor, remark) => {
    const found = unitOf(heading, factor);
    expect(found.confidence).toBeLessThan(0.6);
    expect(found.remarks).toMatch(remark);
  });

  it('says that a stated unit is not known', () => {
    expect(unitOf('Strain (ppm)', 10)).toMatchObject({ confidence: 0.3, remarks: expect.stringContaining('“ppm”') });
  });

  it('asks about a force in kilograms', () => {
    const proposal = propose(['Load (kg);Strain (%)'], (i) => `${5 * i};${0.001 * i}`);
    expect(proposal.layout.columns[0]?.unit).toBe('kgf');
    expect(proposal.confidence).toBeLessThan(0.6);
  });

  it.each([['lbf', 'force'], ['kip', 'force'], ['N', 'force'], ['ksi', 'stress'], ['psi', 'stress'], ['N/mm²', 'stress'], ['MPa', 'stress']])('knows %s', (symbol, channel) => {
    expect(propose([`Ch (${symbol});Strain (%)`], (i) => `${5 * i};${0.001 * i}`).layout.columns[0]?.channel).toBe(channel);
  });
});

describe('pulse waveforms', () => {
  const wave = (i: number, k: number) => (Math.sin(i / 3) * k).toFixed(4);

  it('takes one time and the rest as traces', () => {
    const proposal = propose(['Time (µs),P 1 (V),Shear 2 (V),Index'], (i) => `${0.05 * i},${wave(i, 1)},${wave(i, 2)},${i}`, { waveform: true });
    expect(mapped(proposal)).toEqual(['time µs 1', 'trace V 1', 'trace V 1', 'ignore']);
    expect(proposal.confidence).toBe(1);
  });

  it('reads data to the right of metadata, as oscilloscopes export it, and asks', () => {
    const meta = ['Record length,2500,points', 'Sample interval,1e-7,s', 'Probe,10,'];
    const proposal = propose([], (i) => `${meta[i] ?? ',,'},${(i * 1e-7).toExponential(6)},${wave(i, 0.1)}`, { waveform: true });
    expect(mapped(proposal)).toEqual(['ignore', 'ignore', 'ignore', 'time s 1', 'trace  1']);
    expect(proposal.confidence).toBeLessThan(0.6);
  });

  it('asks when no column rises like time', () => {
    const proposal = propose(['CH1,CH2'], (i) => `${wave(i, 1)},${wave(i, 2)}`, { waveform: true });
    expect(mapped(proposal)).toEqual(['trace  1', 'trace  1']);
    expect(proposal.remarks).toContain('No column of time was recognised.');
  });
});

describe('remembered layouts', () => {
  const head = ['Zeit;Kraft;Kanal 3;Kanal 4', 's;kN;Skt;Skt'];
  const first = propose(head, (i) => cells(i, ';'));
  const confirmed: Layout = { ...first.layout, columns: first.layout.columns.map((c, i) => ({ ...c, channel: (['time', 'force', 'axial1', 'transverse1'] as const)[i] ?? 'ignore', unit: ['s', 'kN', '‰', '‰'][i] ?? '', sign: 1 as const })) };
  const signature = signatureOf(confirmed, first.firstRows) ?? '';
  const remembered = new Map([[signature, confirmed]]);

  it('are taken for the same headings and units', () => {
    expect(first.confidence).toBeLessThan(0.6);
    const again = propose(['Batch 7', ...head], (i) => cells(i, ';'), { remembered });
    expect(again).toMatchObject({ origin: 'remembered', confidence: 1, layout: { headingRow: 1, unitsRow: 2, firstDataRow: 3, columns: confirmed.columns } });
  });

  it('are not taken when the frame now writes another unit', () => {
    expect(propose([head[0] ?? '', 's;N;Skt;Skt'], (i) => cells(i, ';'), { remembered }).origin).toBe('proposed');
  });

  it('are doubted when the load now runs the other way', () => {
    const again = propose(head, (i) => Object.values(record(i)).map((v, k) => (k === 0 ? v : -v).toFixed(3)).join(';'), { remembered });
    expect(again.origin).toBe('remembered');
    expect(again.confidence).toBeLessThan(0.6);
    expect(again.remarks.join(' ')).toMatch(/other way/);
  });
});

describe('workbook rows', () => {
  it('are read like lines, decimal commas in text cells too', () => {
    const rows = [['Record 7'], [], ['Time', 'Load', 'Strain'], ['s', 'kN', '%'], ...steps.map((i) => [String(i), (0.5 * i).toFixed(2).replace('.', ','), (0.001 * i).toFixed(4).replace('.', ',')])];
    const proposal = proposeWorkbookLayout(rows, [], 'Data', rows.length, { waveform: false });
    expect(proposal.layout).toMatchObject({ format: 'workbook', sheet: 'Data', decimal: ',', headingRow: 2, unitsRow: 3, firstDataRow: 4 });
    expect(mapped(proposal)).toEqual(['time s 1', 'force kN 1', 'axial1 % 1']);
  });
});

describe('what is no table', () => {
  it.each<[string, string[], string]>([
    ['blank lines', ['', '  ', ''], 'file-empty'],
    ['one column', ['strain', ...steps.map(String)], 'one-column'],
    ['one column of decimal commas', ['strain', ...steps.map((i) => `${i},5`)], 'one-column'],
    ['prose', ['Dear laboratory,', 'please find no data here; not a number.'], 'no-numbers'],
    ['headings only', ['Time;Load;Strain', 's;kN;%'], 'no-numbers'],
    ['NaN everywhere', ['Time;Load;Strain', ...steps.map(() => 'NaN;NaN;NaN')], 'no-numbers'],
    ['letters in every number', ['Time;Load;Strain', ...steps.map((i) => `${i}O;l.${i};x`)], 'no-numbers'],
    ['65 columns', [Array.from({ length: 65 }, (_, k) => `Ch ${k}`).join(';'), ...steps.map((i) => Array.from({ length: 65 }, (_, k) => i + k).join(';'))], 'too-many-columns'],
  ])('%s is refused', (_, lines, code) => {
    expect(() => proposeDelimitedLayout(lines, [], 'utf-8', lines.length, { waveform: false })).toThrow(expect.objectContaining({ code }));
  });
});
