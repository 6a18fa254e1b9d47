/** Instruments, calibrations, methods and reference checks of the demo laboratory. */
import type { INestApplicationContext } from '@nestjs/common';
import type { InstrumentKind } from '@strainwright/common/contract/vocabulary';
import { InstrumentsService } from '../instruments/instruments.service';
import { MethodsService } from '../methods/methods.service';
import { Clock } from '../platform/clock';
import { ReferenceChecksService } from '../reference-checks/reference-checks.service';
import type { Caller } from '../session/caller';
import { dayBefore, type Scene } from './calendar';

interface Listed {
  readonly name: string;
  readonly kind: InstrumentKind;
  readonly serial: string;
  readonly unit: string;
  readonly resolution: number;
  readonly range: readonly [number, number];
  /** Expanded (k = 2), in the unit, or a fraction when relative. */
  readonly U: number;
  readonly relative?: boolean;
  /** Days before the day on which the demo is made. */
  readonly calibrated: number;
  readonly due: number;
}

const INSTRUMENTS = {
  caliper: { name: 'Caliper CA-2', kind: 'caliper', serial: '20-4471', unit: 'mm', resolution: 0.01, range: [0, 300], U: 0.02, calibrated: 210, due: -155 },
  micrometer: { name: 'Micrometer MI-1', kind: 'micrometer', serial: '11-0932', unit: 'mm', resolution: 0.001, range: [0, 100], U: 0.002, calibrated: 180, due: -185 },
  balance: { name: 'Balance BA-1', kind: 'balance', serial: 'B-5531', unit: 'g', resolution: 0.01, range: [0, 6000], U: 0.02, calibrated: 150, due: -215 },
  heavyBalance: { name: 'Balance BA-2', kind: 'balance', serial: 'B-6107', unit: 'kg', resolution: 0.0005, range: [0, 30], U: 0.001, calibrated: 353, due: -12 },
  pulseUnit: { name: 'Pulse unit PU-1', kind: 'pulse unit', serial: 'PU-3310', unit: 'µs', resolution: 0.01, range: [0, 1000], U: 2e-3, relative: true, calibrated: 120, due: -245 },
  secondPulseUnit: { name: 'Pulse unit PU-2', kind: 'pulse unit', serial: 'PU-2874', unit: 'µs', resolution: 0.01, range: [0, 1000], U: 2e-3, relative: true, calibrated: 240, due: -125 },
  loadCell: { name: 'Load cell LC-100', kind: 'load cell', serial: 'L-7720', unit: 'kN', resolution: 0.0001, range: [0, 100], U: 0.004, relative: true, calibrated: 100, due: -265 },
  press: { name: 'Press PR-3000', kind: 'load cell', serial: 'P-3004', unit: 'kN', resolution: 0.001, range: [0, 3000], U: 0.005, relative: true, calibrated: 140, due: -225 },
  extensometer: { name: 'Extensometer EX-1', kind: 'extensometer', serial: 'E-0915', unit: 'mm', resolution: 0.0001, range: [0, 5], U: 0.005, relative: true, calibrated: 400, due: 35 },
  secondExtensometer: { name: 'Extensometer EX-2', kind: 'extensometer', serial: 'E-1188', unit: 'mm', resolution: 0.0001, range: [0, 5], U: 0.005, relative: true, calibrated: 90, due: -275 },
  gauges: { name: 'Strain gauge bridge SG-4', kind: 'strain gauge', serial: 'S-4402', unit: 'µε', resolution: 0.01, range: [-20000, 20000], U: 0.006, relative: true, calibrated: 130, due: -235 },
} as const satisfies Record<string, Listed>;
export type InstrumentKey = keyof typeof INSTRUMENTS;

const CAUTIONS = 'Presses store energy and specimens may fly apart: guard closed, eye protection on. Follow the standard, the local rules and licensed practice.';
const METHODS = {
  pulse: { code: 'CB-UP-1', name: 'Pulse velocities through a specimen', kind: 'pulse', standard: 'Settings after ASTM D2845 and E494', description: 'Through transmission of P and S pulses, zero time face to face, six couplings.', cautions: 'Coupling agents can irritate the skin: wear gloves. Pulse units carry high voltage.' },
  compression: { code: 'CB-SS-1', name: 'Modulus of concrete in compression', kind: 'stress-strain', standard: 'Settings after ASTM C469', description: 'Two opposed axial gauges and one transverse, loaded to 40 % of the expected strength.', cautions: CAUTIONS },
  tension: { code: 'CB-SS-2', name: 'Modulus of metals in tension', kind: 'stress-strain', standard: 'Settings after ASTM E111 and E132', description: 'Averaging extensometer and a transverse gauge, loaded well below yield.', cautions: CAUTIONS },
} as const;
export type MethodKey = keyof typeof METHODS;

export interface Equipment {
  readonly instruments: Record<InstrumentKey, string>;
  readonly methods: Record<MethodKey, string>;
}

/** Ids are there once the laboratory has been set up. */
export function equipmentToCome(): Equipment {
  return {
    instruments: { caliper: '', micrometer: '', balance: '', heavyBalance: '', pulseUnit: '', secondPulseUnit: '', loadCell: '', press: '', extensometer: '', secondExtensometer: '', gauges: '' },
    methods: { pulse: '', compression: '', tension: '' },
  };
}

export async function setUp(app: INestApplicationContext, equipment: Equipment, today: Date, quality: Caller): Promise<void> {
  const instruments = app.get(InstrumentsService, { strict: false });
  for (const [key, listed] of Object.entries(INSTRUMENTS) as [InstrumentKey, Listed][]) {
    const { name, kind, serial, unit, resolution, range } = listed;
    const { id } = await instruments.add({ name, kind, maker: '', model: '', serial, location: 'Main hall', unit, resolution, rangeLow: range[0], rangeHigh: range[1] }, quality);
    await instruments.calibrate(id, {
      calibratedOn: dayBefore(today, listed.calibrated), dueOn: dayBefore(today, listed.due), certificate: `K-${serial}`, laboratory: 'Ashgill Calibration',
      relative: listed.relative ?? false, expandedUncertainty: listed.U, coverageFactor: 2, correction: 0,
    }, quality);
    equipment.instruments[key] = id;
  }
  const methods = app.get(MethodsService, { strict: false });
  for (const [key, body] of Object.entries(METHODS) as [MethodKey, (typeof METHODS)[MethodKey]][]) equipment.methods[key] = (await methods.write(body, quality)).id;
}

/** Transit times of the bar on PU-2, µs, by days ago: creeping up, the last one out of limits. */
const DRIFT: readonly (readonly [daysAgo: number, time: number])[] = [[63, 25.01], [56, 25.0], [49, 25.02], [42, 25.02], [35, 25.03], [28, 25.03], [21, 25.05], [14, 25.05], [7, 25.06], [2, 25.11]];

/** The bar is checked every week. */
export function referenceChecks(app: INestApplicationContext, equipment: Equipment, quality: () => Caller): Scene[] {
  const service = app.get(ReferenceChecksService, { strict: false });
  const clock = app.get(Clock);
  let pieceId = '';
  return DRIFT.map(([daysAgo, value], i): Scene => ({
    daysAgo, at: '08:15',
    act: async () => {
      if (i === 0) pieceId = (await service.add({ name: 'Reference bar RB-25 on PU-2', quantity: 'transit time P', knownValue: 25, knownExpandedUncertainty: 0.05, unit: 'µs', instrumentId: equipment.instruments.secondPulseUnit }, quality())).id;
      await service.check(pieceId, { value, unit: 'µs', expandedUncertainty: 0.06, checkedAt: clock.now().toISOString() }, quality());
    },
  }));
}
