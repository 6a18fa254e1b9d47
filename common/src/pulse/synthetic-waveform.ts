/**
 * Waveforms whose true arrival is known, for samples, demo and tests. Wavelet: a causal burst
 * sin(2πft)·½(1 − cos(2πft/c)) over c periods, or a damped sine sin(2πft)·e^(−tf/c)·(1 − e^(−2tf)). Noise: a 32-bit linear
 * congruential generator (1664525, 1013904223), twelve uniforms summed less six. Same spec, same samples on every machine.
 */
export interface WaveformSpec {
  /** Hz and s. */
  readonly samplingRate: number;
  readonly samples: number;
  readonly arrival: number;
  readonly frequency: number;
  readonly periods: number;
  readonly kind: 'burst' | 'damped';
  readonly amplitude: number;
  readonly noise: number;
  readonly seed: number;
  readonly drift?: number;
  readonly echo?: { readonly delay: number; readonly factor: number };
  readonly precursor?: { readonly arrival: number; readonly amplitude: number; readonly frequency: number };
  readonly quantisation?: { readonly bits: number; readonly fullScale: number };
}

// Looked up once: under test runners the global object is slow, and these stand in the innermost loops.
const { cos, exp, floor, imul, PI, round, sin } = Math;

/** Sum of twelve uniforms less six: mean 0, standard deviation 1. */
export function irwinHall(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    let sum = 0;
    for (let i = 0; i < 12; i += 1) {
      state = (imul(1664525, state) + 1013904223) >>> 0;
      sum += state / 4294967296;
    }
    return sum - 6;
  };
}

function wavelet(t: number, f: number, c: number, kind: 'burst' | 'damped'): number {
  if (t < 0) return 0;
  if (kind === 'damped') return sin(2 * PI * f * t) * exp((-t * f) / c) * (1 - exp(-t * f * 2));
  const T = c / f;
  return t <= T ? sin(2 * PI * f * t) * 0.5 * (1 - cos((2 * PI * t) / T)) : 0;
}

export function syntheticWaveform(spec: WaveformSpec): { time: Float64Array; amplitude: Float64Array } {
  const { samplingRate, samples, arrival, frequency, periods, kind, echo, precursor, quantisation } = spec;
  const time = new Float64Array(samples);
  const amplitude = new Float64Array(samples);
  const noise = irwinHall(spec.seed);
  for (let i = 0; i < samples; i += 1) {
    const t = i / samplingRate;
    let x = spec.amplitude * wavelet(t - arrival, frequency, periods, kind);
    if (echo !== undefined) x += echo.factor * spec.amplitude * wavelet(t - arrival - echo.delay, frequency, periods, kind);
    if (precursor !== undefined) x += precursor.amplitude * wavelet(t - precursor.arrival, precursor.frequency, periods, kind);
    x += spec.noise * noise() + ((spec.drift ?? 0) * t * samplingRate) / samples;
    if (quantisation !== undefined) {
      const q = (2 * quantisation.fullScale) / 2 ** quantisation.bits;
      x = roundHalfEven(x / q) * q;
    }
    time[i] = t;
    amplitude[i] = x;
  }
  return { time, amplitude };
}

function roundHalfEven(x: number): number {
  const below = floor(x);
  const rest = x - below;
  if (rest !== 0.5) return round(x);
  return below % 2 === 0 ? below : below + 1;
}
