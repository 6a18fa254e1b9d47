/**
 * A pulse run of known constants. Everything that the budget names is drawn from the distribution that the budget states: scale and
 * offset errors of caliper, balance and time base, the specimen's non-uniformity, the resolutions, the zero time and the reading noise.
 * With waveforms, the arrivals lie between samples, each coupling shifts the onset, P runs ahead in the traces of S, and noise,
 * shape and sampling differ from run to run.
 */
import type { ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import type { FilePurpose, WaveRecord } from '@strainwright/common/contract/runs';
import type { Waveform } from '@strainwright/common/pulse/arrivals';
import type { PulseInput } from '@strainwright/common/pulse/evaluate-pulse';
import { syntheticWaveform, type WaveformSpec } from '@strainwright/common/pulse/synthetic-waveform';
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';
import type { ReadingState } from '@strainwright/common/specimens/measure-specimen';
import { RandomStream } from '@strainwright/common/uncertainty/random-stream';

export interface Truth {
  readonly E: number;
  readonly nu: number;
  readonly G: number;
  readonly K: number;
}

type Waves = Readonly<Record<'P' | 'S', number>>;

const DAY = '2025-06-02';

function instrument(id: string, expandedUncertainty: number, resolution: number, relative: boolean, correction: number): InstrumentState {
  return { id, name: id, resolution, rangeLow: null, rangeHigh: null, calibration: { calibratedOn: '2025-02-03', dueOn: '2026-02-02', expandedUncertainty, relative, coverageFactor: 2, correction } };
}

/** The certificates: a correction for two of them, so that one left out would show. */
const CALIPER = instrument('caliper', 2e-5, 1e-5, false, 3e-5);
const BALANCE = instrument('balance', 4e-5, 1e-5, false, 0);
const PULSE_UNIT = instrument('pulse unit', 1e-3, 1e-8, true, -4e-4);

/** One draw of everything that is the same for all readings of a run. */
class Bench {
  readonly readings: ReadingState[] = [];
  private readonly errors = new Map<string, number>();

  constructor(readonly random: RandomStream) {}

  /** What the instrument shows less what is true; a fraction when relative. */
  private errorOf({ id, calibration }: InstrumentState): number {
    const known = this.errors.get(id);
    if (known !== undefined) return known;
    const error = ((calibration?.expandedUncertainty ?? 0) / (calibration?.coverageFactor ?? 1)) * this.random.normal() - (calibration?.correction ?? 0);
    this.errors.set(id, error);
    return error;
  }

  shown(state: InstrumentState, value: number): number {
    return state.calibration?.relative === true ? value / (1 - this.errorOf(state)) : value + this.errorOf(state);
  }

  /** An error between −δ/2 and δ/2. */
  grain(resolution: number): number {
    return resolution * (this.random.uniform() - 0.5);
  }

  /** Readings of a quantity whose stations scatter about its mean; the grain is common to them. */
  read(quantity: ReadingQuantity, state: InstrumentState, value: number, stations: number, scatter: number): void {
    const grain = this.grain(state.resolution);
    for (let i = 0; i < stations; i += 1) {
      const shown = this.shown(state, value + scatter * this.random.normal()) + grain;
      this.readings.push({ id: `${quantity} ${i}`, quantity, station: i + 1, value: shown, readAt: `${DAY}T08:00:00Z`, instrument: state });
    }
  }
}

interface Piece {
  readonly truth: Truth;
  readonly length: number;
  readonly transit: Waves;
}

function piece(bench: Bench): Piece {
  const { random } = bench;
  const [E, nu, density] = [40e9 + 170e9 * random.uniform(), 0.15 + 0.22 * random.uniform(), 2500 + 5500 * random.uniform()];
  const [length, diameter] = [0.06 + 0.06 * random.uniform(), 0.05 + 0.02 * random.uniform()];
  const [G, K] = [E / (2 * (1 + nu)), E / (3 * (1 - 2 * nu))];
  bench.read('length', CALIPER, length, 5, 2e-5);
  bench.read('diameter', CALIPER, diameter, 6, 2e-5);
  bench.read('mass', BALANCE, (density * Math.PI * diameter ** 2 * length) / 4, 1, 0);
  return { truth: { E, nu, G, K }, length, transit: { P: length / Math.sqrt((K + (4 * G) / 3) / density), S: length / Math.sqrt(G / density) } };
}

function inputOf(bench: Bench, frequency: number, resolution: number, waves: Readonly<Record<'P' | 'S', WaveRecord>>, waveforms: readonly Waveform[], seed: number): PulseInput {
  return {
    specimen: { shape: 'cylinder', materialClass: 'metal' }, readings: bench.readings, performedAt: `${DAY}T09:00:00Z`, timeInstrument: PULSE_UNIT, waveforms, seed,
    record: { kind: 'pulse', frequency, timeResolution: resolution, zeroDeterminedAt: `${DAY}T08:30:00Z`, ...waves }, settings: { kind: 'pulse', arrivals: [], picker: 'AIC' },
  };
}

const ZERO: Waves = { P: 0.62e-6, S: 1.05e-6 };
/** Standard deviation of one reading or coupling, s. */
const NOISE: Waves = { P: 0.02e-6, S: 0.04e-6 };

export type ZeroWay = 'face to face' | 'reference bar' | 'several lengths';

/** Transit times as a person types them. */
export function typedRun(way: ZeroWay, seed: number): { input: PulseInput; truth: Truth } {
  const bench = new Bench(new RandomStream(seed));
  const { random } = bench;
  const { truth, transit } = piece(bench);
  const resolution = 1e-8;
  const times = (wave: 'P' | 'S', time: number, n: number) => {
    const grain = bench.grain(resolution);
    return Array.from({ length: n }, () => bench.shown(PULSE_UNIT, time + ZERO[wave] + NOISE[wave] * random.normal()) + grain);
  };
  const zeroOf = (wave: 'P' | 'S'): WaveRecord['zero'] => {
    if (way === 'face to face') return { by: way, readings: times(wave, 0, 6) };
    if (way === 'reference bar') {
      const [knownTime, knownTimeUncertainty] = [25.4e-6, 0.01e-6];
      return { by: way, readings: times(wave, knownTime + knownTimeUncertainty * random.normal(), 6), knownTime, knownTimeUncertainty };
    }
    return { by: way, points: [0.02, 0.04, 0.06, 0.08, 0.1, 0.12, 0.14].map((length) => ({ length, time: bench.shown(PULSE_UNIT, ZERO[wave] + length / (wave === 'P' ? 5900 : 3200) + NOISE[wave] * random.normal()) })) };
  };
  const wave = (name: 'P' | 'S'): WaveRecord => ({ readings: times(name, transit[name], 6), zero: zeroOf(name) });
  return { truth, input: inputOf(bench, 1e6, resolution, { P: wave('P'), S: wave('S') }, [], seed) };
}

export interface Pulse {
  readonly name: string;
  readonly kind: 'burst' | 'damped';
  readonly periods: number;
  /** Hz. */
  readonly frequency: number;
  readonly samplesPerPeriod: number;
  /** Standard deviation over the largest amplitude of a trace. */
  readonly noise: number;
  readonly bits: number;
  /** Amplitude of P in the traces of S. */
  readonly precursor: number;
  readonly traces: number;
  /** Standard deviation from coupling to coupling, periods; a single trace cannot show it. */
  readonly coupling: number;
}

/** Arrivals to be picked, the zero time face to face on the same transducers, or typed from elsewhere. */
export function waveformRun(pulse: Pulse, zeroPicked: boolean, seed: number): { input: PulseInput; truth: Truth } {
  const bench = new Bench(new RandomStream(seed));
  const { random } = bench;
  const { truth, transit } = piece(bench);
  const { frequency, samplesPerPeriod, precursor, coupling } = pulse;
  const samplingRate = frequency * samplesPerPeriod;
  const shoot = (purpose: FilePurpose, arrival: number, earlier: number | null): Waveform => ({
    purpose,
    traces: Array.from({ length: pulse.traces }, (_, i) => {
      const coupled = bench.shown(PULSE_UNIT, arrival) + (coupling / frequency) * random.normal();
      const spec: WaveformSpec = {
        samplingRate, samples: Math.ceil((coupled + 12 / frequency) * samplingRate), arrival: coupled, frequency, periods: pulse.periods, kind: pulse.kind, amplitude: 0.9, noise: 0.9 * pulse.noise,
        seed: Math.floor(random.uniform() * 2 ** 31), quantisation: { bits: pulse.bits, fullScale: 1 },
        precursor: earlier === null ? undefined : { arrival: bench.shown(PULSE_UNIT, earlier), amplitude: 0.9 * precursor, frequency },
      };
      return { name: `shot ${i + 1}`, ...syntheticWaveform(spec) };
    }),
  });
  // The delay lies well after the trigger: a trace must show some quiet before its onset.
  const delay: Waves = { P: 2.3 / frequency, S: 2.9 / frequency };
  const shots = [shoot('waveform P', transit.P + delay.P, null), shoot('waveform S', transit.S + delay.S, transit.P + delay.S)];
  const zeros = zeroPicked ? [shoot('zero P', delay.P, null), shoot('zero S', delay.S, null)] : [];
  const typed = (name: 'P' | 'S'): WaveRecord => ({ readings: [], zero: zeroPicked ? null : { by: 'face to face', readings: Array.from({ length: 6 }, () => bench.shown(PULSE_UNIT, delay[name] + NOISE[name] * random.normal())) } });
  return { truth, input: inputOf(bench, frequency, 1e-8, { P: typed('P'), S: typed('S') }, [...shots, ...zeros], seed) };
}
