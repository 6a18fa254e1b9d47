/** Fennick's alloys: the nickel alloy certified, with an extensometer whose calibration had lapsed; the aluminium alloy, by pulse only, with its certificate still a draft. */
import type { Determination } from '@strainwright/common/contract/determinations';
import type { Bench } from './bench';
import type { Scene } from './calendar';
import { Commission } from './commission';
import type { InstrumentKey } from './equipment';
import { areaOf, measurePiece, type Bar } from './pieces';
import { pulseFiles, pulseRecord } from './pulse-run';
import { extensometerRecordFile } from './raw-files';
import { TRUTHS, type Truth } from './truths';

const FREQUENCY = 5e6;
const GAUGE_LENGTH = 0.025;
const LAPSED = 'EX-1 was compared with EX-2 on the calibrator on the day of the test: they agreed within 0.2 %.';

interface Alloy {
  readonly title: string;
  readonly reference: string;
  readonly material: string;
  readonly describedAs: string;
  readonly truth: Truth;
  readonly bar: Bar;
  /** Null where the customer wants pulse runs only. */
  readonly tension: { readonly peakStress: number; readonly extensometer: InstrumentKey } | null;
  readonly seed: number;
  readonly leastE: number;
  /** Days ago of request, opening, intake, measuring, pulse run, load run, fits, review, certificate. */
  readonly days: readonly [number, number, number, number, number, number, number, number, number];
  readonly release: boolean;
}

const NICKEL: Alloy = {
  title: 'Rotor disc stock, nickel alloy', reference: 'FR-2271', material: 'Nickel alloy NR-4', describedAs: 'Forged nickel-base alloy NR-4, heat 8812, solution treated and aged.', truth: TRUTHS.nickelAlloy,
  bar: { length: 0.06002, width: 0.02001, thickness: 0.012 }, tension: { peakStress: 300e6, extensometer: 'extensometer' }, seed: 7300, leastE: 195e9, days: [38, 37, 36, 34, 32, 31, 30, 29, 28], release: true,
};
const ALUMINIUM: Alloy = {
  title: 'Blade blanks, aluminium alloy', reference: 'FR-2304', material: 'Aluminium alloy AF-2', describedAs: 'Rolled aluminium alloy AF-2, batch 31, artificially aged.', truth: TRUTHS.aluminiumAlloy,
  bar: { length: 0.05999, width: 0.025, thickness: 0.01501 }, tension: null, seed: 8100, leastE: 68e9, days: [16, 15, 14, 13, 12, 12, 11, 9, 8], release: false,
};

export const nickel = (bench: () => Bench): Scene[] => alloyOrder(bench, NICKEL);
export const aluminium = (bench: () => Bench): Scene[] => alloyOrder(bench, ALUMINIUM);

function alloyOrder(bench: () => Bench, alloy: Alloy): Scene[] {
  const [requested, opened, received, measured, pulsed, loaded, fitted, reviewed, certified] = alloy.days;
  const { truth, bar, tension } = alloy;
  let order: Commission;
  const fits = { dynamic: '', static: '' };
  const determinations: Determination[] = [];
  return [
    {
      daysAgo: requested, at: '12:00',
      act: async () => {
        order = new Commission(bench(), 'fennick');
        await order.request({
          title: alloy.title, customerReference: alloy.reference, materialDescription: alloy.describedAs, constantsWanted: ['E', 'nu', 'G', 'K'], kindsOfRun: tension === null ? ['pulse'] : ['pulse', 'stress-strain'],
          limits: [{ constant: 'E', lower: alloy.leastE, upper: null, rule: 'guard band' }], dueInDays: 21,
        });
      },
    },
    { daysAgo: opened, at: '08:30', act: () => order.open() },
    { daysAgo: received, at: '10:30', act: () => order.log({ material: alloy.material, materialClass: 'metal', description: 'Bar cut by the customer', condition: 'clean, edges broken' }, { shape: 'prism', orientation: 'axis along the working direction', count: 1 }) },
    { daysAgo: measured, at: '09:10', act: () => measurePiece(bench(), order.specimen(0), bar, truth, { length: 'micrometer', step: 0.001, mass: 'balance' }) },
    {
      daysAgo: pulsed, at: '14:20',
      act: async () => {
        const files = pulseFiles(alloy.reference.toLowerCase(), { truth, length: bar.length, frequency: FREQUENCY, samplingRate: 200e6, seed: alloy.seed });
        const run = await bench().record(order.specimen(0), 'pulse', { time: 'pulseUnit' }, pulseRecord(FREQUENCY, bench().clock.now()), files);
        fits.dynamic = await bench().ask(run.id, { kind: 'pulse', picker: 'AIC', arrivals: [] });
      },
    },
    {
      daysAgo: loaded, at: '15:40',
      act: async () => {
        if (tension === null) return;
        const file = extensometerRecordFile(`${alloy.reference.toLowerCase()}-tension.txt`, {
          rows: 1200, interval: 0.05, ...truth, peakStress: tension.peakStress, area: areaOf(bar), toe: { strain: 2e-5, stress: tension.peakStress / 60 }, noise: { force: 6, strain: 6e-7 }, seed: alloy.seed + 50,
        }, GAUGE_LENGTH);
        const run = await bench().record(order.specimen(0), 'tension', { force: 'loadCell', axial: tension.extensometer, transverse: 'gauges' }, { kind: 'stress-strain', axialGaugeLength: GAUGE_LENGTH, transverseGaugeLength: null, compressive: false }, [file]);
        fits.static = await bench().ask(run.id, { kind: 'stress-strain', region: { by: 'automatic' } });
      },
    },
    {
      daysAgo: fitted, at: '09:50',
      act: async () => {
        const reasons = { OUT_OF_CALIBRATION: LAPSED };
        determinations.push(await bench().submit(order.specimen(0), 'dynamic', fits.dynamic, reasons));
        if (tension !== null) determinations.push(await bench().submit(order.specimen(0), 'static', fits.static, reasons));
      },
    },
    { daysAgo: reviewed, at: '13:30', act: async () => { for (const { id } of determinations) await bench().accept(id); } },
    {
      daysAgo: certified, at: '11:15',
      act: async () => {
        const id = await order.draft(determinations.map((d) => d.id));
        if (alloy.release) await order.release(id);
      },
    },
  ];
}
