import { randomUUID } from 'node:crypto';
import { mkdirSync } from 'node:fs';
import { diskStorage } from 'multer';
import { LARGEST_FILE } from './storage';

/** Limits and place of multipart uploads: streamed to `incoming`, never held in memory. File names arrive as UTF-8. */
export function uploadOptions(incoming: string) {
  return {
    storage: diskStorage({
      destination: (_request, _file, done) => {
        mkdirSync(incoming, { recursive: true, mode: 0o700 });
        done(null, incoming);
      },
      filename: (_request, _file, done) => done(null, randomUUID()),
    }),
    limits: { fileSize: LARGEST_FILE, files: 20, fields: 20, fieldSize: 1024 * 1024, parts: 40 },
    defParamCharset: 'utf8',
  };
}
