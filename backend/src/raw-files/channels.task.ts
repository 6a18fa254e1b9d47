import type { MessagePort } from 'node:worker_threads';
import type { channelSeries } from '@strainwright/common/contract/run-answers';
import { toSI, unit } from '@strainwright/common/quantities/units';
import type { ColumnValues } from '@strainwright/common/tabular/read-columns';
import type { z } from 'zod';
import { columnsOf, type CachedFile } from './column-cache';

export interface ChannelsJob {
  folder: string;
  points: number;
  files: (CachedFile & { fileId: string; purpose: z.infer<typeof channelSeries>['purpose'] })[];
}

/** Rows to draw: of each of points/2 bins the lowest and the highest of the leading column, so that no extreme is lost. */
function drawnRows(leading: Float64Array, points: number): Int32Array {
  const n = leading.length;
  if (n <= points) return Int32Array.from({ length: n }, (_, i) => i);
  const bins = Math.floor(points / 2);
  const rows = new Set<number>([0, n - 1]);
  for (let b = 0; b < bins; b += 1) {
    const [from, to] = [Math.floor((b * n) / bins), Math.floor(((b + 1) * n) / bins)];
    let [low, high] = [from, from];
    for (let i = from; i < to; i += 1) {
      if ((leading[i] ?? 0) < (leading[low] ?? 0)) low = i;
      if ((leading[i] ?? 0) > (leading[high] ?? 0)) high = i;
    }
    rows.add(low).add(high);
  }
  return Int32Array.from([...rows].sort((a, b) => a - b));
}

const LEADING = ['force', 'stress', 'trace'];

function series({ mapping, values }: ColumnValues, rows: Int32Array) {
  const known = unit(mapping.unit);
  const si = { length: 'm', time: 's', force: 'N', pressure: 'Pa', strain: '1' }[known?.dimension as string] ?? mapping.unit;
  return {
    name: mapping.heading || `column ${mapping.column + 1}`, channel: mapping.channel, unit: si,
    values: Array.from(rows, (row) => {
      const value = (values[row] ?? Number.NaN) * mapping.sign;
      return Number.isFinite(value) ? (known === undefined ? value : toSI(value, known.symbol)) : null;
    }),
  };
}

/** Columns of a run's files for a plot, in SI, thinned. */
export default async function runChannelsTask({ job, progress }: { job: ChannelsJob; progress: MessagePort }): Promise<z.infer<typeof channelSeries>[]> {
  const answers: z.infer<typeof channelSeries>[] = [];
  for (const file of job.files) {
    const read = await columnsOf(job.folder, file, (fraction) => progress.postMessage(fraction));
    const leading = read.columns.find((c) => LEADING.includes(c.mapping.channel)) ?? read.columns[0];
    const rows = drawnRows(leading?.values ?? new Float64Array(0), job.points);
    answers.push({
      fileId: file.fileId, purpose: file.purpose, rowCount: read.rows, problems: [...read.problems], problemCount: read.problemCount,
      series: read.columns.map((c) => series(c, rows)),
    });
  }
  return answers;
}
