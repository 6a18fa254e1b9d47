import type { NextFunction, Request, Response } from 'express';
import { Problem } from './problem';

const CODES: Readonly<Record<string, [number, string, string]>> = {
  'entity.too.large': [413, 'body.too-large', 'The request is larger than 1 MB.'],
  'entity.parse.failed': [400, 'body.not-json', 'The body is not a JSON object.'],
  'encoding.unsupported': [415, 'body.encoding', 'The body is compressed in a way that is not supported.'],
  'charset.unsupported': [415, 'body.charset', 'The body must be UTF-8.'],
  'request.size.invalid': [400, 'body.length', 'The body is not as long as its head says.'],
  'request.aborted': [400, 'body.aborted', 'The request ended before its body did.'],
};

/** Stands behind the body parser: what it could not read is told with a code of ours. */
export function bodyErrors(error: unknown, _request: Request, _response: Response, next: NextFunction): void {
  const type = typeof error === 'object' && error !== null ? (error as { type?: unknown }).type : undefined;
  const known = typeof type === 'string' ? CODES[type] : undefined;
  next(known === undefined ? error : new Problem(...known));
}
