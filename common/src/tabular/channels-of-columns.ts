/**
 * Which column is which channel, told by headings in the trade's words, units, and how the numbers behave. Convention after
 * `sign`: stress and axial strain grow on loading; transverse strain falls where ν > 0. A crosshead's travel is never strain.
 */
import type { Channel, ColumnMapping } from '../contract/runs';
import { correlation } from '../statistics/descriptive';
import { unit } from '../quantities/units';

export interface ColumnText {
  readonly heading: string;
  readonly unitText: string;
  /** The first numbers of the column, NaN where a cell is none. */
  readonly values: readonly number[];
  readonly isClock: boolean;
}

export interface MappedColumns {
  readonly columns: ColumnMapping[];
  readonly confidence: number;
  readonly remarks: string[];
}

const WORDS: readonly (readonly [Channel | 'stroke' | 'strain', RegExp])[] = [
  ['ignore', /\b(nr|no|number|index|point|punkt|cycle|status|marker|temp\w*)\b|#/i],
  ['stroke', /crosshead|stroke|traverse|travel|position|\blvdt frame\b|actuator|\bram\b|\bweg\b|déplacement|deplacement/i],
  ['time', /\btime\b|\bzeit\b|\btemps\b|^t$|elapsed|\bclock\b|seconds/i],
  ['stress', /\bstress\b|spannung|contrainte|^(σ|sigma)$/i],
  ['force', /\bload\b|\bforce\b|\bkraft\b|\bcharge\b|^[fp]$|\blast\b/i],
  ['transverse1', /trans|lateral|\blat\b|quer|circumf|diametr|hoop|radial|\bt[12]?\b$|transv/i],
  ['strain', /strain|dehnung|déformation|deformation|exten|\bext\d?\b|axial|\bax\d?\b|longitud|längs|elong|gauge|gage|\bsg\s?\d|^(ε|eps|epsilon)/i],
  ['trace', /ampl|volt|signal|trace|\bch\w*\s*\d*\b|shot|\bcoupling\b|\b[ps][ -]?wave\b/i],
];

function byWord(heading: string): Channel | 'stroke' | 'strain' | null {
  return WORDS.find(([, pattern]) => pattern.test(heading))?.[0] ?? null;
}

const finiteOf = (values: readonly number[]) => values.filter(Number.isFinite);
const isIncreasing = (values: readonly number[]) => values.length > 3 && values.every((v, i) => i === 0 || v > (values[i - 1] ?? Number.NaN));

/** Unit by its text; by magnitude, with a remark, where the text says nothing. */
function strainUnit(column: ColumnText): { unit: string; sure: boolean } {
  const known = unit(column.unitText);
  if (known !== undefined) return { unit: known.symbol, sure: true };
  const top = Math.max(...finiteOf(column.values).map(Math.abs));
  if (top > 20) return { unit: 'µε', sure: false };
  return { unit: top > 0.1 ? '%' : 'mm/mm', sure: false };
}

function guess(column: ColumnText): { channel: Channel | 'stroke' | 'strain' | null; unit: string } {
  const dimension = unit(column.unitText)?.dimension;
  const symbol = unit(column.unitText)?.symbol ?? '';
  const word = byWord(column.heading);
  if (column.isClock) return { channel: 'time', unit: 's' };
  if (word === 'ignore' || word === 'stroke') return { channel: word, unit: symbol };
  if (dimension === 'time') return { channel: 'time', unit: symbol };
  if (dimension === 'force') return { channel: 'force', unit: symbol };
  if (dimension === 'pressure') return { channel: 'stress', unit: symbol };
  if (dimension === 'voltage') return { channel: 'trace', unit: symbol };
  if (dimension === 'temperature') return { channel: 'ignore', unit: symbol };
  if (dimension === 'strain' || dimension === 'length') return { channel: word === 'transverse1' ? 'transverse1' : word === 'time' || word === 'force' || word === 'stress' ? null : 'strain', unit: symbol };
  return { channel: word, unit: symbol };
}

/** Numbers the strain columns as axial and transverse: by word first, else transverse is the one that runs against the rest. */
function nameStrains(columns: readonly ColumnText[], channels: (Channel | 'stroke' | 'strain' | null)[], remarks: string[]): void {
  const named = channels.map((c, i) => ({ c, i })).filter(({ c }) => c === 'strain' || c === 'transverse1');
  const anyTransverse = named.some(({ c }) => c === 'transverse1');
  const load = channels.findIndex((c) => c === 'force' || c === 'stress');
  const sense = (i: number) => {
    const [x, y] = [columns[i]?.values ?? [], columns[load]?.values ?? []];
    const rows = x.map((v, k) => [v, y[k] ?? Number.NaN] as const).filter(([a, b]) => Number.isFinite(a) && Number.isFinite(b));
    return rows.length > 3 ? Math.sign(correlation(rows.map(([a]) => a), rows.map(([, b]) => b))) : 1;
  };
  if (!anyTransverse && load >= 0 && named.length >= 2) {
    const senses = named.map(({ i }) => sense(i));
    const reach = (i: number) => Math.max(...finiteOf(columns[i]?.values ?? []).map(Math.abs), 0);
    const main = named.map(({ i }) => i).sort((a, b) => reach(b) - reach(a))[0] ?? -1;
    named.forEach(({ i }, k) => {
      if (i !== main && senses[k] !== sense(main)) {
        channels[i] = 'transverse1';
        remarks.push(`${columns[i]?.heading || `Column ${i + 1}`} runs against the other strain: taken as transverse.`);
      }
    });
  }
  const number = (kind: 'strain' | 'transverse1', names: readonly Channel[]) => {
    channels.map((c, i) => ({ c, i })).filter(({ c }) => c === kind).forEach(({ i }, k) => {
      channels[i] = names[k] ?? 'ignore';
    });
  };
  number('transverse1', ['transverse1', 'transverse2']);
  number('strain', ['axial1', 'axial2']);
}

/** Signs so that stress and axial strain grow on loading, whatever sign the file gives compression. */
function signOf(channel: Channel, columns: readonly ColumnText[], channels: readonly (Channel | null)[]): 1 | -1 {
  const largest = (i: number) => finiteOf(columns[i]?.values ?? []).reduce((top, v) => (Math.abs(v) > Math.abs(top) ? v : top), 0);
  const first = (kinds: readonly Channel[]) => channels.findIndex((c) => c !== null && kinds.includes(c));
  const axial = first(['axial1']);
  if (channel === 'force' || channel === 'stress') return largest(first([channel])) < 0 ? -1 : 1;
  if (channel === 'axial1' || channel === 'axial2' || channel === 'transverse1' || channel === 'transverse2') return axial >= 0 && largest(axial) < 0 ? -1 : 1;
  return 1;
}

/** @param waveform true where the file is a pulse waveform: one time column, the rest traces */
export function mapColumns(columns: readonly ColumnText[], waveform: boolean): MappedColumns {
  const remarks: string[] = [];
  const guesses = columns.map(guess);
  let channels: (Channel | 'stroke' | 'strain' | null)[] = guesses.map((g) => g.channel);
  let confidence = 1;
  if (waveform) {
    const time = Math.max(channels.indexOf('time'), 0);
    channels = channels.map((c, i) => (i === time ? 'time' : c === 'ignore' ? 'ignore' : 'trace'));
  } else {
    if (!channels.includes('time')) {
      const rising = columns.findIndex((c, i) => channels[i] === null && isIncreasing(finiteOf(c.values)));
      if (rising >= 0) channels[rising] = 'time';
    }
    channels.forEach((c, i) => {
      if (c !== 'stroke') return;
      channels[i] = 'ignore';
      remarks.push(`${columns[i]?.heading ?? ''} is the machine's travel, not strain: ignored.`);
    });
    nameStrains(columns, channels, remarks);
    if (!channels.includes('force') && !channels.includes('stress')) {
      confidence = 0.3;
      remarks.push('No column of force or stress was recognised.');
    }
    if (!channels.includes('axial1')) {
      confidence = 0.3;
      remarks.push('No column of axial strain or extension was recognised.');
    }
  }
  const finalChannels = channels.map((c): Channel => (c === null || c === 'stroke' || c === 'strain' ? 'ignore' : c));
  const mapped = columns.map((column, i): ColumnMapping => {
    const channel = finalChannels[i] ?? 'ignore';
    let symbol = guesses[i]?.unit ?? '';
    if (symbol === '' && channel !== 'ignore' && channel !== 'trace') {
      const isStrain = channel.startsWith('axial') || channel.startsWith('transverse');
      const proposed = isStrain ? strainUnit(column).unit : channel === 'time' ? (waveform ? 'µs' : 's') : channel === 'force' ? 'kN' : 'MPa';
      symbol = proposed;
      confidence = Math.min(confidence, channel === 'time' && !waveform ? 0.9 : 0.5);
      remarks.push(`${column.heading || `Column ${i + 1}`} states no unit: ${proposed} is proposed from its size; please check.`);
    }
    return { column: i, heading: column.heading, channel, unit: symbol, sign: signOf(channel, columns, finalChannels) };
  });
  if (mapped.some((m) => m.sign === -1)) remarks.push('Signs are turned so that stress and axial strain grow on loading.');
  return { columns: mapped, confidence, remarks };
}
