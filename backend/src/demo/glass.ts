/** Lune Hollow's glass: one order at work, fitted on the pulse unit whose reference bar drifts; one only requested; and an order that was cancelled. */
import type { Run } from '@strainwright/common/contract/run-answers';
import type { Bench } from './bench';
import type { Scene } from './calendar';
import { Commission } from './commission';
import { measurePiece, type Bar } from './pieces';
import { pulseFiles, pulseRecord } from './pulse-run';
import { TRUTHS } from './truths';

const PLATE: Bar = { length: 0.03001, width: 0.06002, thickness: 0.05998 };
const FREQUENCY = 2.5e6;

export function glass(bench: () => Bench): Scene[] {
  const truth = TRUTHS.glass;
  let order: Commission;
  let run: Run;
  return [
    {
      daysAgo: 10, at: '10:40',
      act: async () => {
        order = new Commission(bench(), 'lune');
        await order.request({ title: 'Mirror blank glass LH-7', customerReference: 'LH-7/3', materialDescription: 'Borosilicate mirror blank, melt LH-7, fine annealed.', constantsWanted: ['E', 'nu'], kindsOfRun: ['pulse'], dueInDays: 16 });
      },
    },
    { daysAgo: 9, at: '09:05', act: () => order.open() },
    { daysAgo: 8, at: '11:30', act: () => order.log({ material: 'Glass LH-7', materialClass: 'glass', description: 'Plate sawn from the blank', condition: 'polished faces, no chips' }, { shape: 'plate', orientation: 'pulse through the thickness of the blank', count: 1 }) },
    { daysAgo: 7, at: '09:25', act: () => measurePiece(bench(), order.specimen(0), PLATE, truth, { length: 'micrometer', step: 0.001, mass: 'balance' }) },
    {
      daysAgo: 3, at: '14:10',
      act: async () => {
        const files = pulseFiles('lh-7', { truth, length: PLATE.length, frequency: FREQUENCY, samplingRate: 100e6, seed: 9_400 });
        run = await bench().record(order.specimen(0), 'pulse', { time: 'secondPulseUnit' }, pulseRecord(FREQUENCY, bench().clock.now()), files);
      },
    },
    { daysAgo: 1, at: '08:45', act: async () => bench().made(await bench().ask(run.id, { kind: 'pulse', picker: 'AIC', arrivals: [] })) },
  ];
}

export function glassRequest(bench: () => Bench): Scene[] {
  return [{
    daysAgo: 1, at: '09:30',
    act: () => new Commission(bench(), 'lune').request({ title: 'Prism glass LH-9', customerReference: 'LH-9/1', materialDescription: 'Dense prism glass, melt LH-9, two plates to follow by courier.', constantsWanted: ['E', 'nu', 'G', 'K'], kindsOfRun: ['pulse'], dueInDays: 30 }),
  }];
}

export function cancelledRequest(bench: () => Bench): Scene[] {
  let order: Commission;
  return [
    {
      daysAgo: 26, at: '15:20',
      act: async () => {
        order = new Commission(bench(), 'fennick');
        await order.request({ title: 'Shaft coupling, polymer', customerReference: 'FR-2290', materialDescription: 'Moulded coupling, polymer not named.', constantsWanted: ['E'], kindsOfRun: ['stress-strain'] });
      },
    },
    { daysAgo: 24, at: '10:00', act: () => order.cancel('The customer found the value in an older certificate') },
  ];
}
