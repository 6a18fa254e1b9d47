/** The unit of a column: as the file states it, else proposed by the size of its numbers and said to be doubtful. */
import type { Channel } from '../contract/runs';
import { unit, type Dimension } from '../quantities/units';
import { finiteOf, largestOf, nameOf, type ColumnText } from './column-text';
import type { Doubts } from './doubts';

const isStrain = (channel: Channel) => channel.startsWith('axial') || channel.startsWith('transverse');

/** Strains of 200 % and more are no test of stiffness; strains under 10⁻⁸ are none that a gauge resolves. */
const LARGEST_STRAIN = 2;
const SMALLEST_STRAIN = 1e-8;

function strainBySize(largest: number): string {
  if (largest > 20) return 'µε';
  return largest > 0.1 ? '%' : 'mm/mm';
}

/** By the whole time that a waveform takes: pulses through specimens last from under a microsecond to some milliseconds. */
function timeBySize(column: ColumnText): string {
  const values = finiteOf(column.values);
  const span = (values[values.length - 1] ?? 0) - (values[0] ?? 0);
  if (span < 0.05) return 's';
  return span > 5000 ? 'ns' : 'µs';
}

function proposed(column: ColumnText, channel: Channel, waveform: boolean): string {
  if (isStrain(channel)) return strainBySize(largestOf(column));
  if (channel === 'time') return waveform ? timeBySize(column) : 's';
  return channel === 'force' ? 'kN' : 'MPa';
}

function strainOutOfSize(column: ColumnText, symbol: string): boolean {
  const factor = unit(symbol)?.factor ?? 1;
  const largest = largestOf(column) * factor;
  return largest > LARGEST_STRAIN || (largest > 0 && largest < SMALLEST_STRAIN);
}

const FITTING: Readonly<Partial<Record<Channel, Dimension>>> = { time: 'time', force: 'force', stress: 'pressure' };

/** The unit that a column of a channel gets; a doubt is said where it is not the file's own. */
export function unitOfColumn(column: ColumnText, channel: Channel, waveform: boolean, doubts: Doubts): string {
  const known = unit(column.unitText);
  if (channel === 'ignore' || channel === 'trace') return known?.symbol ?? '';
  if (column.isClock) return 's';
  const fits = known !== undefined && (isStrain(channel) ? known.dimension === 'strain' || known.dimension === 'length' : known.dimension === FITTING[channel]);
  if (fits) {
    if (isStrain(channel) && known.dimension === 'strain' && strainOutOfSize(column, known.symbol)) {
      doubts.say(0.4, `${nameOf(column)} states ${known.symbol}, but its numbers go to ${largestOf(column).toPrecision(3)}, which is no strain of a specimen in that unit; ${strainBySize(largestOf(column))}?`);
    }
    return known.symbol;
  }
  if (channel === 'force' && known?.dimension === 'mass') {
    const symbol = known.symbol === 'lb' ? 'lbf' : known.symbol === 'kg' ? 'kgf' : 'kN';
    doubts.say(0.5, `${nameOf(column)} is a force, but states ${known.symbol}: ${symbol} is proposed; please check.`);
    return symbol;
  }
  const symbol = proposed(column, channel, waveform);
  if (column.unitText === '') doubts.say(channel === 'time' && !waveform ? 0.9 : 0.5, `${nameOf(column)} states no unit: ${symbol} is proposed${isStrain(channel) || waveform ? ' from its size' : ''}; please check.`);
  else doubts.say(0.3, `${nameOf(column)} states the unit “${column.unitText}”, which is not known${isStrain(channel) ? ' as a strain or length' : ` as ${channel === 'stress' ? 'a stress' : channel === 'force' ? 'a force' : 'a time'}`}: ${symbol} is proposed; please check.`);
  return symbol;
}
