/** Granite for the crossing's piers: certified, then amended because a mass had been misread; closed. */
import type { Determination } from '@strainwright/common/contract/determinations';
import type { Run } from '@strainwright/common/contract/run-answers';
import type { Bench } from './bench';
import type { Scene } from './calendar';
import { Commission } from './commission';
import { massOf, measurePiece, type Cylinder } from './pieces';
import { pulseFiles, pulseRecord } from './pulse-run';
import { TRUTHS } from './truths';

const PIECES: readonly Cylinder[] = [{ length: 0.10004, diameter: 0.05001 }, { length: 0.09996, diameter: 0.05003 }];
const FREQUENCY = 1e6;
const MISREAD_GRAMS = 9;

export function granite(bench: () => Bench): Scene[] {
  let order: Commission;
  const runs: Run[] = [];
  const fits: string[] = [];
  const determinations: Determination[] = [];
  let certificateId = '';
  const truth = TRUTHS.granite;

  const ask = async (i: number) => void (fits[i] = await bench().ask(runs[i]?.id ?? '', { kind: 'pulse', picker: 'AIC', arrivals: [] }));
  const submit = (i: number) => bench().submit(order.specimen(i), 'dynamic', fits[i] ?? '');

  return [
    {
      daysAgo: 48, at: '10:05',
      act: async () => {
        order = new Commission(bench(), 'harbeck');
        await order.request({
          title: 'Granite facing blocks, north pier', customerReference: 'HX-NP-017', materialDescription: 'Grey medium-grained granite, two cores of one block, bedding not visible.',
          constantsWanted: ['E', 'nu', 'G', 'K'], kindsOfRun: ['pulse'], limits: [{ constant: 'E', lower: 50e9, upper: null, rule: 'guard band' }], dueInDays: 14,
        });
      },
    },
    { daysAgo: 47, at: '09:00', act: () => order.open() },
    {
      daysAgo: 45, at: '11:20',
      act: () => order.log({ material: 'Granite', materialClass: 'rock', description: 'Cores of block 17', condition: 'sound, ends ground', sampledDaysBefore: 6, sampledBy: 'Harbeck site team' }, { shape: 'cylinder', orientation: 'core axis vertical in the block', moisture: 'oven dry', count: 2 }),
    },
    {
      daysAgo: 44, at: '09:40',
      act: async () => {
        for (const [i, piece] of PIECES.entries()) await measurePiece(bench(), order.specimen(i), piece, i === 1 ? misread(piece) : truth, { length: 'caliper', step: 0.01, mass: 'balance' });
      },
    },
    {
      daysAgo: 43, at: '13:15',
      act: async () => {
        for (const [i, { length }] of PIECES.entries()) {
          const files = pulseFiles(`granite-${i + 1}`, { truth, length, frequency: FREQUENCY, samplingRate: 50e6, seed: 20_260 + i });
          runs.push(await bench().record(order.specimen(i), 'pulse', { time: 'pulseUnit' }, pulseRecord(FREQUENCY, bench().clock.now()), files));
          await ask(i);
        }
      },
    },
    { daysAgo: 42, at: '09:30', act: async () => void determinations.push(await submit(0), await submit(1)) },
    { daysAgo: 41, at: '15:00', act: async () => { for (const { id } of determinations) await bench().accept(id); } },
    {
      daysAgo: 40, at: '10:10',
      act: async () => {
        certificateId = await order.draft(determinations.map(({ id }) => id));
        await order.release(certificateId);
      },
    },
    {
      daysAgo: 30, at: '08:50',
      act: async () => {
        await bench().correct(order.specimen(1), 'mass', Number((massOf(PIECES[1] ?? { length: 0, diameter: 0 }, truth) * 1e3).toFixed(2)), 'g', 'balance', `The intake sheet shows that the mass was copied ${MISREAD_GRAMS} g too high`);
        await ask(1);
      },
    },
    { daysAgo: 29, at: '10:30', act: async () => void (determinations[1] = await submit(1)) },
    { daysAgo: 28, at: '09:20', act: async () => void (await bench().accept(determinations[1]?.id ?? '', 'Only the mass changed; density and constants follow it')) },
    {
      daysAgo: 27, at: '16:00',
      act: async () => {
        certificateId = await order.amend(certificateId, `The mass of the second core had been entered ${MISREAD_GRAMS} g too high; its density, E, G and K are corrected.`);
        await order.release(certificateId);
      },
    },
    { daysAgo: 20, at: '09:00', act: () => order.close() },
  ];

  /** The density that a mass copied too high gives. */
  function misread(piece: Cylinder) {
    const mass = massOf(piece, truth);
    return { ...truth, density: truth.density * ((mass + MISREAD_GRAMS / 1e3) / mass) };
  }
}
