/** Makes samples/: seeded, so that the same files come out on every machine. Run by `npm run samples`. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { PULSE_FILES } from './pulse-files';
import { readme } from './readme';
import { STRESS_STRAIN_FILES, type Content } from './stress-strain-files';

export const SAMPLE_FILES: Readonly<Record<string, () => Content>> = { ...STRESS_STRAIN_FILES, ...PULSE_FILES, 'README.md': readme };

/** @param folder where they are written */
export async function generateSamples(folder: string): Promise<void> {
  mkdirSync(folder, { recursive: true });
  for (const [name, make] of Object.entries(SAMPLE_FILES)) writeFileSync(join(folder, name), await make());
}
