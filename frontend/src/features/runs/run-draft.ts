/** A run as it is being recorded: times as typed in µs, lengths in mm, turned into the contract's SI when it is sent. */
import type { newRun } from '@strainwright/common/contract/run-answers';
import type { FilePurpose, ZeroTime } from '@strainwright/common/contract/runs';
import type { Wave } from '@strainwright/common/contract/vocabulary';
import { parseDecimal, type DecimalStyle } from '@strainwright/common/quantities/decimal';
import { z } from 'zod';

const waveDraft = z.object({
  times: z.string(), zeroBy: z.enum(['face to face', 'reference bar', 'several lengths', 'none']), zeroTimes: z.string(), knownTime: z.string(), knownUncertainty: z.string(), lengths: z.string(),
});
export type WaveDraft = z.infer<typeof waveDraft>;

export const runDraft = z.object({
  methodId: z.string(), performedAt: z.string(), temperature: z.string(), humidity: z.string(), notes: z.string(),
  time: z.string(), force: z.string(), axial: z.string(), transverse: z.string(), frame: z.string(),
  frequency: z.string(), timeResolution: z.string(), P: waveDraft, S: waveDraft,
  axialGaugeLength: z.string(), transverseGaugeLength: z.string(), compressive: z.boolean(),
});
export type RunDraft = z.infer<typeof runDraft>;

const emptyWave: WaveDraft = { times: '', zeroBy: 'face to face', zeroTimes: '', knownTime: '', knownUncertainty: '', lengths: '' };

/** @param now local date and time for the field, `YYYY-MM-DDTHH:mm` */
export function emptyRun(now: string): RunDraft {
  return {
    methodId: '', performedAt: now, temperature: '', humidity: '', notes: '', time: '', force: '', axial: '', transverse: '', frame: '', frequency: '', timeResolution: '0.01',
    P: emptyWave, S: emptyWave, axialGaugeLength: '', transverseGaugeLength: '', compressive: true,
  };
}

export class DraftFault extends Error {
  constructor(readonly field: string, message: string) {
    super(message);
  }
}

type Body = z.input<typeof newRun>;

class Reader {
  constructor(private readonly style: DecimalStyle) {}

  number(field: string, text: string): number {
    const parsed = parseDecimal(text, this.style);
    if ('value' in parsed) return parsed.value;
    throw new DraftFault(field, parsed.problem === 'ambiguous' ? `“${text}” could be read two ways: leave out the thousands separator` : parsed.problem === 'empty' ? 'Enter a number' : `“${text}” is not a number`);
  }

  optional(field: string, text: string): number | null {
    return text.trim() === '' ? null : this.number(field, text);
  }

  /** Numbers on lines of their own, or with blanks or semicolons between them. */
  list(field: string, text: string): number[] {
    return text.split(/[\s;]+/).filter((t) => t !== '').map((t) => this.number(field, t));
  }
}

const micro = (us: number) => us / 1e6;

function zeroOf(read: Reader, wave: Wave, draft: WaveDraft): ZeroTime | null {
  if (draft.zeroBy === 'none') return null;
  if (draft.zeroBy === 'several lengths') {
    const points = draft.lengths.split(/\n/).filter((l) => l.trim() !== '').map((line) => {
      const [length, time] = read.list(`${wave}.lengths`, line);
      if (length === undefined || time === undefined) throw new DraftFault(`${wave}.lengths`, 'Give a length (mm) and a time (µs) on each line');
      return { length: length / 1000, time: micro(time) };
    });
    if (points.length < 3) throw new DraftFault(`${wave}.lengths`, 'At least three lengths');
    return { by: 'several lengths', points };
  }
  const readings = read.list(`${wave}.zeroTimes`, draft.zeroTimes).map(micro);
  if (readings.length === 0) throw new DraftFault(`${wave}.zeroTimes`, `Enter the zero time of ${wave}, or say that there is none`);
  if (draft.zeroBy === 'face to face') return { by: 'face to face', readings };
  return { by: 'reference bar', readings, knownTime: micro(read.number(`${wave}.knownTime`, draft.knownTime)), knownTimeUncertainty: micro(read.number(`${wave}.knownUncertainty`, draft.knownUncertainty)) };
}

/**
 * The body to send.
 * @param purposes of the files attached, in order
 * @throws DraftFault naming the field that cannot be read
 */
export function runToSend(draft: RunDraft, kind: 'pulse' | 'stress-strain', purposes: readonly FilePurpose[], style: DecimalStyle): Body {
  const read = new Reader(style);
  if (draft.methodId === '') throw new DraftFault('methodId', 'Choose the method');
  const performedAt = new Date(draft.performedAt);
  if (Number.isNaN(performedAt.getTime())) throw new DraftFault('performedAt', 'Enter when the run was made');
  const named = kind === 'pulse' ? { time: draft.time } : { force: draft.force, axial: draft.axial, transverse: draft.transverse, frame: draft.frame };
  const mm = (field: 'axialGaugeLength' | 'transverseGaugeLength') => {
    const value = read.optional(field, draft[field]);
    return value === null ? null : value / 1000;
  };
  const wave = (w: Wave) => ({ readings: read.list(`${w}.times`, draft[w].times).map(micro), zero: purposes.includes(`zero ${w}`) ? null : zeroOf(read, w, draft[w]) });
  const kilohertz = read.optional('frequency', draft.frequency);
  return {
    methodId: draft.methodId, performedAt: performedAt.toISOString(),
    conditions: { temperature: read.optional('temperature', draft.temperature), humidity: read.optional('humidity', draft.humidity), notes: draft.notes },
    instruments: Object.fromEntries(Object.entries(named).filter(([, id]) => id !== '')),
    record: kind === 'pulse'
      ? { kind: 'pulse', frequency: kilohertz === null ? null : kilohertz * 1000, timeResolution: micro(read.number('timeResolution', draft.timeResolution)), zeroDeterminedAt: performedAt.toISOString(), P: wave('P'), S: wave('S') }
      : { kind: 'stress-strain', axialGaugeLength: mm('axialGaugeLength'), transverseGaugeLength: mm('transverseGaugeLength'), compressive: draft.compressive },
    files: purposes.map((purpose) => ({ purpose })),
  };
}
