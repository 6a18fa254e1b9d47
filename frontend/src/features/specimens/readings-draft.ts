/** Readings as they are typed, before they are sent: pure, so that it can be tested. */
import type { NewReading } from '@strainwright/common/contract/specimens';
import type { InstrumentKind, ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import { parseDecimal, type DecimalStyle } from '@strainwright/common/quantities/decimal';
import { z } from 'zod';

export const draftRow = z.object({ unit: z.string(), instrumentId: z.string(), values: z.array(z.string()) });
export const readingsDraft = z.record(z.string(), draftRow);
export type DraftRow = z.infer<typeof draftRow>;
export type ReadingsDraft = z.infer<typeof readingsDraft>;

export const UNITS_OF: Readonly<Record<ReadingQuantity, readonly string[]>> = {
  length: ['mm', 'cm', 'm', 'in'], diameter: ['mm', 'cm', 'm', 'in'], width: ['mm', 'cm', 'm', 'in'], thickness: ['mm', 'cm', 'm', 'in'],
  mass: ['g', 'kg', 'lb'], massInWater: ['g', 'kg', 'lb'], waterTemperature: ['°C'],
};
export const KINDS_OF: Readonly<Record<ReadingQuantity, readonly InstrumentKind[]>> = {
  length: ['caliper', 'micrometer'], diameter: ['caliper', 'micrometer'], width: ['caliper', 'micrometer'], thickness: ['caliper', 'micrometer'],
  mass: ['balance'], massInWater: ['balance'], waterTemperature: ['thermometer'],
};
export const QUANTITY_NAMES: Readonly<Record<ReadingQuantity, string>> = {
  length: 'Length (along the test axis)', diameter: 'Diameter', width: 'Width', thickness: 'Thickness', mass: 'Mass', massInWater: 'Mass in water', waterTemperature: 'Water temperature',
};

/** A column copied from a spreadsheet: one value a line, or side by side with tabs. */
export function pastedValues(text: string): string[] {
  return text.split(/[\r\n\t]+/).map((cell) => cell.trim()).filter((cell) => cell !== '');
}

export interface DraftProblem { quantity: string; station: number; message: string }

const PROBLEMS = { empty: 'Enter a number', 'not a number': 'Not a number', ambiguous: 'Could be read two ways: leave out the thousands separator' } as const;

/** What is to be sent, or what is wrong with it. Empty fields are left out. */
export function readingsToSend(draft: ReadingsDraft, style: DecimalStyle, firstStation: (quantity: string) => number): { readings: NewReading[]; problems: DraftProblem[] } {
  const readings: NewReading[] = [];
  const problems: DraftProblem[] = [];
  for (const [quantity, row] of Object.entries(draft)) {
    row.values.forEach((text, i) => {
      if (text.trim() === '') return;
      const parsed = parseDecimal(text, style);
      if ('problem' in parsed) problems.push({ quantity, station: i, message: PROBLEMS[parsed.problem] });
      else if (row.instrumentId === '') problems.push({ quantity, station: i, message: 'Choose the instrument' });
      // The quantity comes from the shape's own list; the server parses it again.
      else readings.push({ quantity: quantity as ReadingQuantity, station: firstStation(quantity) + i, value: parsed.value, unit: row.unit, instrumentId: row.instrumentId });
    });
  }
  return { readings, problems };
}
