/** Which columns of strain are axial and which transverse, and the signs by which loading is positive. */
import { correlation } from '../statistics/descriptive';
import type { Channel } from '../contract/runs';
import { dimensionOf, finiteOf, nameOf, type ColumnText } from './column-text';
import type { Doubts } from './doubts';

/** A second gauge of one direction reads about as much as the first; a transverse one reads ν times that. */
const LEAST_SHARE_OF_TWIN = 0.6;

const span = (column: ColumnText) => {
  const values = finiteOf(column.values);
  return values.reduce((top, v) => Math.max(top, v), -Infinity) - values.reduce((low, v) => Math.min(low, v), Infinity);
};

/** +1 when the two columns move together, −1 when against each other. */
export function sense(a: ColumnText, b: ColumnText): 1 | -1 {
  const rows = a.values.map((v, i) => [v, b.values[i] ?? Number.NaN] as const).filter(([x, y]) => Number.isFinite(x) && Number.isFinite(y));
  return rows.length > 3 && correlation(rows.map(([x]) => x), rows.map(([, y]) => y)) < 0 ? -1 : 1;
}

/** +1 when the column moves up from its first number to where `leader` is farthest from its own. */
export function direction(column: ColumnText, leader: ColumnText): 1 | -1 {
  const rows = column.values.map((v, i) => [v, leader.values[i] ?? Number.NaN] as const).filter(([v, lead]) => Number.isFinite(v) && Number.isFinite(lead));
  const [start] = rows;
  if (start === undefined) return 1;
  const farthest = rows.reduce((far, row) => (Math.abs(row[1] - start[1]) > Math.abs(far[1] - start[1]) ? row : far), start);
  return farthest[0] < start[0] ? -1 : 1;
}

/** Of sensors of one direction only those in one dimension are a pair: strains before extensions, which may be the machine's. */
function ofOneDimension(columns: readonly ColumnText[], doubts: Doubts): ColumnText[] {
  const strains = columns.filter((c) => dimensionOf(c) === 'strain');
  const extensions = columns.filter((c) => dimensionOf(c) === 'length');
  if (strains.length === 0 || extensions.length === 0) return [...columns];
  doubts.say(0.7, `${extensions.map(nameOf).join(', ')} ${extensions.length === 1 ? 'is an extension' : 'are extensions'} beside strain: not used.`);
  return columns.filter((c) => !extensions.includes(c));
}

function named(columns: readonly ColumnText[], names: readonly [Channel, Channel], doubts: Doubts, channels: Map<number, Channel>): void {
  const [first, second, ...more] = ofOneDimension(columns, doubts);
  if (first !== undefined) channels.set(first.index, names[0]);
  if (second !== undefined) channels.set(second.index, names[1]);
  if (more.length > 0) doubts.say(0.5, `Two sensors of one direction can be used: ${more.map(nameOf).join(', ')} ${more.length === 1 ? 'is' : 'are'} left out.`);
}

/**
 * @param strains columns of strain or extension whose direction is not told by words; where no other column is transverse by its
 * words, the one with the largest span is axial and those that move against it are transverse
 */
export function strainChannels(strains: readonly ColumnText[], transverse: readonly ColumnText[], doubts: Doubts): Map<number, Channel> {
  const channels = new Map<number, Channel>();
  const main = [...strains].sort((a, b) => span(b) - span(a))[0];
  let axial = [...strains];
  let across = [...transverse];
  if (across.length === 0 && main !== undefined) {
    across = axial.filter((c) => c !== main && dimensionOf(c) === dimensionOf(main) && sense(c, main) < 0);
    axial = axial.filter((c) => !across.includes(c));
    for (const column of across) doubts.say(0.8, `${nameOf(column)} runs against ${nameOf(main)}: taken as transverse.`);
  }
  named(axial, ['axial1', 'axial2'], doubts, channels);
  named(across, ['transverse1', 'transverse2'], doubts, channels);
  const pair = axial.filter((c) => channels.has(c.index));
  const [smaller, larger] = [...pair].sort((a, b) => span(a) - span(b));
  if (smaller !== undefined && larger !== undefined && span(smaller) < LEAST_SHARE_OF_TWIN * span(larger)) {
    doubts.say(0.5, `${nameOf(smaller)} reads much less than ${nameOf(larger)}: is it a second axial sensor, or a transverse one?`);
  }
  return channels;
}
