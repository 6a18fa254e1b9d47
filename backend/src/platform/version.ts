import { readFileSync } from 'node:fs';
import { join } from 'node:path';

/** Of the program as a whole; stands in every fit and certificate. */
export const VERSION: string = (JSON.parse(readFileSync(join(__dirname, '..', '..', '..', 'package.json'), 'utf8')) as { version: string }).version;
