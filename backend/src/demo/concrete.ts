/** Bridge concrete: one cylinder returned because its window began in the seating, one waiting for review, one not yet measured. */
import type { Determination } from '@strainwright/common/contract/determinations';
import type { FitSettings } from '@strainwright/common/contract/runs';
import type { Bench } from './bench';
import type { Scene } from './calendar';
import { Commission } from './commission';
import { areaOf, measurePiece, type Cylinder } from './pieces';
import { gaugeRecordFile } from './raw-files';
import { TRUTHS } from './truths';

const PIECES: readonly Cylinder[] = [{ length: 0.2998, diameter: 0.1499 }, { length: 0.3002, diameter: 0.15 }];
const AUTOMATIC: FitSettings = { kind: 'stress-strain', region: { by: 'automatic' } };
const FROM_ZERO: FitSettings = { kind: 'stress-strain', region: { by: 'by hand', from: 0, to: 1.6e-4, reason: 'First part of the loading, as in the last job' } };

export function concrete(bench: () => Bench): Scene[] {
  let order: Commission;
  const fits: string[] = [];
  const submitted: Determination[] = [];
  const truth = TRUTHS.concrete;

  const submit = async (i: number) => void (submitted[i] = await bench().submit(order.specimen(i), 'static', fits[i] ?? ''));

  return [
    {
      daysAgo: 21, at: '14:00',
      act: async () => {
        order = new Commission(bench(), 'harbeck');
        await order.request({
          title: 'Deck concrete, pour 12', customerReference: 'HX-D-12', materialDescription: 'C40 deck concrete, cast on site, 28 days at test.', constantsWanted: ['E', 'nu'], kindsOfRun: ['stress-strain'],
          limits: [{ constant: 'E', lower: 27e9, upper: null, rule: 'one-sided 5 %' }], dueInDays: 27,
        });
      },
    },
    { daysAgo: 20, at: '09:30', act: () => order.open() },
    {
      daysAgo: 18, at: '10:00',
      act: () => order.log({ material: 'Concrete', materialClass: 'concrete', description: 'Cylinders of pour 12', condition: 'ends ground, no cracks seen', sampledDaysBefore: 27, sampledBy: 'Harbeck site team' }, { shape: 'cylinder', orientation: 'casting direction along the axis', moisture: 'saturated surface dry', count: 3 }),
    },
    { daysAgo: 17, at: '09:15', act: async () => { for (const [i, piece] of PIECES.entries()) await measurePiece(bench(), order.specimen(i), piece, truth, { length: 'caliper', step: 0.01, mass: 'heavyBalance' }); } },
    {
      daysAgo: 15, at: '10:45',
      act: async () => {
        for (const [i, piece] of PIECES.entries()) {
          const file = gaugeRecordFile(`pour12-${i + 1}.csv`, {
            rows: 900, interval: 0.1, ...truth, peakStress: 15e6, area: areaOf(piece), toe: { strain: 6e-5, stress: 0.7e6 }, bending: 0.03 + 0.01 * i, noise: { force: 25, strain: 4e-7 }, seed: 4100 + i,
          });
          const run = await bench().record(order.specimen(i), 'compression', { force: 'press', axial: 'gauges', transverse: 'gauges' }, { kind: 'stress-strain', axialGaugeLength: null, transverseGaugeLength: null, compressive: true }, [file]);
          fits.push(await bench().ask(run.id, i === 0 ? FROM_ZERO : AUTOMATIC));
        }
      },
    },
    { daysAgo: 13, at: '16:30', act: () => submit(0) },
    { daysAgo: 12, at: '11:20', act: async () => void (await bench().sendBack(submitted[0]?.id ?? '', 'The window begins in the seating: the slope there is far below that of the rest of the record. Fit again without the toe.')) },
    { daysAgo: 11, at: '09:40', act: () => submit(1) },
  ];
}
