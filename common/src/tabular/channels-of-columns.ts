/**
 * Which column is which channel, told by headings in the trade's words, units, and how the numbers behave. Convention after
 * `sign`: stress and axial strain grow on loading; transverse strain falls where ν > 0. A crosshead's travel is never strain.
 */
import type { Channel, ColumnMapping } from '../contract/runs';
import { dimensionOf, isIncreasing, isNumeric, nameOf, type ColumnText } from './column-text';
import { Doubts } from './doubts';
import { roleOfHeading, type Role } from './heading-words';
import { direction, strainChannels } from './strain-columns';
import { unitOfColumn } from './units-of-columns';

export interface MappedColumns {
  readonly columns: ColumnMapping[];
  readonly confidence: number;
  readonly remarks: string[];
}

/** What a column is by its words and its unit, where they agree; null when neither tells or they contradict each other. */
function roleOf(column: ColumnText, doubts: Doubts): Role | null {
  if (column.isClock) return 'time';
  if (!isNumeric(column)) return null;
  const word = roleOfHeading(column.heading);
  const dimension = dimensionOf(column);
  if (word === 'counter' || word === 'other' || word === 'mean') return word;
  if (dimension === 'temperature') return 'other';
  if (dimension === 'time') return 'time';
  if (dimension === 'force') return 'force';
  if (dimension === 'pressure') return 'stress';
  if (dimension === 'voltage') return 'trace';
  if (dimension === 'strain' || dimension === 'length') {
    if (word === 'transverse' || word === 'stroke' || word === 'displacement') return word;
    if ((word === null || word === 'trace') && dimension === 'length') return 'displacement';
    if (word !== 'time' && word !== 'force' && word !== 'stress') return 'strain';
    doubts.say(0.3, `${nameOf(column)} states ${column.unitText}, which does not suit its heading: not used.`);
    return null;
  }
  return word;
}

interface Roled {
  readonly column: ColumnText;
  readonly role: Role | null;
}

const withRole = (roled: readonly Roled[], ...roles: Role[]) => roled.filter(({ role }) => role !== null && roles.includes(role)).map(({ column }) => column);

/** The one column of a kind: the rest is said to be left out. */
function only(columns: readonly ColumnText[], preferred: (column: ColumnText) => boolean, kind: string, doubts: Doubts): ColumnText | undefined {
  const chosen = columns.find(preferred) ?? columns[0];
  if (columns.length > 1) doubts.say(0.7, `${columns.length} columns of ${kind}: ${chosen === undefined ? '' : nameOf(chosen)} is taken.`);
  return chosen;
}

/** A mean counts as a sensor only where no column of its kind stands beside it. */
function withoutMeans(roled: readonly Roled[]): Roled[] {
  return roled.map(({ column, role }) => {
    if (role !== 'mean') return { column, role };
    const dimension = dimensionOf(column);
    const alone = !roled.some((other) => other.role !== 'mean' && other.role !== 'other' && dimensionOf(other.column) === dimension);
    const kind = roleOfHeading(column.heading.replace(/mean|average|avg|mittel\w*|moyen\w*/gi, ' ').trim());
    return { column, role: alone ? (kind ?? (dimension === 'strain' ? 'strain' : null)) : 'other' };
  });
}

function stressStrainChannels(all: readonly Roled[], doubts: Doubts): Map<number, Channel> {
  const roled = withoutMeans(all);
  const strains = withRole(roled, 'strain');
  const transverse = withRole(roled, 'transverse');
  const displacements = withRole(roled, 'displacement');
  const channels = strainChannels(strains, transverse, doubts);
  const put = (column: ColumnText | undefined, channel: Channel) => {
    if (column !== undefined) channels.set(column.index, channel);
  };
  const unnamed = roled.filter(({ column, role }) => role === null && isIncreasing(column) && column.heading === '').map(({ column }) => column);
  const times = withRole(roled, 'time');
  put(times.length > 0 ? only(times, isIncreasing, 'time', doubts) : unnamed[0], 'time');
  put(only(withRole(roled, 'force'), () => true, 'force', doubts), 'force');
  put(only(withRole(roled, 'stress'), () => true, 'stress', doubts), 'stress');
  for (const column of withRole(roled, 'stroke')) doubts.say(1, `${nameOf(column)} is the machine's travel, not strain: ignored.`);
  for (const column of displacements) {
    doubts.say(strains.length > 0 ? 0.9 : 0.3, `${nameOf(column)} may be the machine's travel: ignored. Use it as axial only if a sensor on the specimen measured it.`);
  }
  for (const column of withRole(roled, 'trace')) doubts.say(0.5, `${nameOf(column)} is no force, stress or strain: not used.`);
  const mapped = [...channels.values()];
  if (!mapped.includes('force') && !mapped.includes('stress')) doubts.say(0.3, 'No column of force or stress was recognised.');
  if (!mapped.includes('axial1')) doubts.say(0.3, 'No column of axial strain or extension was recognised.');
  return channels;
}

function waveformChannels(roled: readonly Roled[], doubts: Doubts): Map<number, Channel> {
  const channels = new Map<number, Channel>();
  const numeric = roled.filter(({ column }) => isNumeric(column)).map(({ column }) => column);
  const time = withRole(roled, 'time').find(isIncreasing) ?? withRole(roled, 'time')[0] ?? numeric.find((column) => isIncreasing(column) && dimensionOf(column) === undefined && roleOfHeading(column.heading) !== 'counter');
  if (time === undefined) doubts.say(0.3, 'No column of time was recognised.');
  else if (!withRole(roled, 'time').includes(time)) doubts.say(0.5, `${nameOf(time)} rises from row to row: taken as time.`);
  for (const { column, role } of roled) {
    if (column === time) channels.set(column.index, 'time');
    else if (isNumeric(column) && role !== 'time' && role !== 'counter' && dimensionOf(column) !== 'temperature') channels.set(column.index, 'trace');
  }
  if (![...channels.values()].includes('trace')) doubts.say(0.3, 'No column of a trace was recognised.');
  return channels;
}

/** Signs by which loading is positive, whatever sign the file gives compression. */
function signs(columns: readonly ColumnText[], channels: ReadonlyMap<number, Channel>, doubts: Doubts): Map<Channel, 1 | -1> {
  const column = (channel: Channel) => columns.find((c) => channels.get(c.index) === channel);
  const found = new Map<Channel, 1 | -1>();
  const leader = column('force') ?? column('stress') ?? column('axial1');
  const turn = (channel: Channel, sign: 1 | -1) => {
    if (column(channel) !== undefined) found.set(channel, sign);
  };
  const along = (channel: Channel): 1 | -1 => {
    const own = column(channel);
    return own === undefined || leader === undefined ? 1 : direction(own, leader);
  };
  turn('force', along('force'));
  turn('stress', along('stress'));
  const axial = along('axial1');
  turn('axial1', axial);
  turn('axial2', axial);
  // Turned with the axial one, a transverse strain falls on loading, unless the file gives both as amounts.
  const amounts = along('transverse1') === axial;
  turn('transverse1', amounts ? (-axial as 1 | -1) : axial);
  turn('transverse2', amounts ? (-axial as 1 | -1) : axial);
  if (column('transverse1') !== undefined && column('axial1') !== undefined && amounts) {
    doubts.say(0.55, 'Transverse strain moves the same way as axial strain, which would make ν negative: taken as an amount and turned; please check.');
  }
  return found;
}

/** @param waveform true where the file is a pulse waveform: one time column, the rest traces */
export function mapColumns(columns: readonly ColumnText[], waveform: boolean): MappedColumns {
  const doubts = new Doubts();
  const roled = columns.map((column) => ({ column, role: roleOf(column, waveform ? new Doubts() : doubts) }));
  const channels = waveform ? waveformChannels(roled, doubts) : stressStrainChannels(roled, doubts);
  const turned = waveform ? new Map<Channel, 1 | -1>() : signs(columns, channels, doubts);
  const mapped = columns.map((column): ColumnMapping => {
    const channel = channels.get(column.index) ?? 'ignore';
    return { column: column.index, heading: column.heading, channel, unit: unitOfColumn(column, channel, waveform, doubts), sign: turned.get(channel) ?? 1 };
  });
  if (mapped.some((m) => m.sign === -1)) doubts.say(1, 'Signs are turned so that stress and axial strain grow on loading.');
  return { columns: mapped, confidence: doubts.confidence, remarks: doubts.remarks };
}
