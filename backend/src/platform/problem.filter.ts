import { ArgumentsHost, Catch, ExceptionFilter, HttpException, Logger } from '@nestjs/common';
import type { Response } from 'express';
import { MulterError } from 'multer';
import { Problem } from './problem';

/** Turns whatever was thrown into RFC 9457 problem details; unknown errors are logged and told without their inside. */
@Catch()
export class ProblemFilter implements ExceptionFilter {
  private readonly logger = new Logger('Problem');

  catch(thrown: unknown, host: ArgumentsHost): void {
    const response = host.switchToHttp().getResponse<Response>();
    const problem = asProblem(thrown);
    if (problem.status >= 500) this.logger.error(thrown instanceof Error ? (thrown.stack ?? thrown.message) : String(thrown));
    if (response.headersSent) {
      response.destroy();
      return;
    }
    response.status(problem.status).set(problem.headers).type('application/problem+json').send(JSON.stringify(problem.document()));
  }
}

/** Express throws errors with `status`. */
const hasStatus = (e: unknown): e is { status: number } => typeof e === 'object' && e !== null && typeof (e as { status?: unknown }).status === 'number';

const CODES: Readonly<Record<number, string>> = {
  400: 'request.malformed', 401: 'session.missing', 403: 'action.forbidden', 404: 'route.not-found', 405: 'route.method', 413: 'body.too-large', 415: 'body.content-type', 429: 'request.too-many', 503: 'server.not-ready',
};

function asProblem(thrown: unknown): Problem {
  if (thrown instanceof Problem) return thrown;
  if (thrown instanceof MulterError) return fromUpload(thrown);
  const status = thrown instanceof HttpException ? thrown.getStatus() : hasStatus(thrown) ? thrown.status : 500;
  if (status >= 400 && status < 500) return new Problem(status, CODES[status] ?? 'request.refused', status === 404 ? 'There is nothing at this address.' : (thrown as Error).message);
  return new Problem(500, 'server.error', 'The server could not do this. Nothing was stored. Try again; if it stays, tell the administrator.');
}

function fromUpload(error: MulterError): Problem {
  const path = error.field ?? 'files';
  switch (error.code) {
    case 'LIMIT_FILE_SIZE': return new Problem(413, 'file.too-large', 'A file is larger than 200 MB.', [{ path, message: 'Larger than 200 MB' }]);
    case 'LIMIT_FILE_COUNT': return new Problem(413, 'file.too-many', 'Too many files in one request: at most 20.', [{ path, message: 'At most 20 files' }]);
    case 'LIMIT_FIELD_VALUE': return new Problem(413, 'body.too-large', 'A field of the form is larger than 1 MB.', [{ path, message: 'Larger than 1 MB' }]);
    default: return new Problem(400, 'upload.malformed', `The upload cannot be read: ${error.message}.`, [{ path, message: error.message }]);
  }
}
