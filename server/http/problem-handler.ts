import type { ErrorRequestHandler } from 'express';
import multer from 'multer';
import type { Logger } from 'pino';
import { Problem } from '#shared/problems.ts';

interface Cause {
  code?: string;
  constraint?: string;
}

/** What a database error means to the person who asked. */
function fromDatabase(cause: Cause): Problem | undefined {
  switch (cause.code) {
    case '55P03':
    case '40P01':
    case '40001':
      return new Problem(
        'busy',
        'Somebody else is writing to the same month. Nothing was saved; send it again.',
      );
    case '57014':
      return new Problem('too-slow', 'The answer took too long. Choose a shorter time and try again.');
    case '57P01':
    case '57P02':
    case '57P03':
    case 'ECONNREFUSED':
    case 'ECONNRESET':
      return new Problem(
        'database-away',
        'The record cannot be reached just now. Nothing was saved; try again in a moment.',
      );
    case '23P01':
      return new Problem(
        'fields-need-another-look',
        'These dates overlap with a period that is already there.',
      );
    case '23505':
      return new Problem('already-done', 'A record with the same name or number is already there.');
    case '23503':
      return new Problem('fields-need-another-look', 'This names a record that does not exist here.');
    default:
      return undefined;
  }
}

function toProblem(error: unknown): Problem {
  if (error instanceof Problem) return error;
  if (error instanceof multer.MulterError) {
    return error.code === 'LIMIT_FILE_SIZE'
      ? new Problem('file-too-big', 'The file is larger than 10 MB. Send the sheet with the results only.')
      : new Problem('file-not-readable', 'The upload must carry one file in the field "file".');
  }
  const thrown = error as { code?: string; cause?: Cause; type?: string; message?: string } | null;
  if (thrown?.type === 'entity.parse.failed')
    return new Problem('fields-need-another-look', 'The request is not readable JSON.');
  if (thrown?.type === 'entity.too.large') return new Problem('file-too-big', 'The request is too large.');
  const away = thrown?.message?.includes('timeout exceeded when trying to connect') ? '57P03' : undefined;
  const cause = thrown?.cause?.code ? thrown.cause : { code: away ?? thrown?.code ?? '' };
  return (
    fromDatabase(cause) ??
    new Problem(
      'unexpected',
      'Something went wrong on the server. Nothing was saved; the request can be sent again.',
    )
  );
}

/** The one place where a failure becomes an answer. Nothing internal leaves it. */
export function problemHandler(log: Logger): ErrorRequestHandler {
  return (error, request, response, next) => {
    if (response.headersSent) return next(error);
    const problem = toProblem(error);
    const requestId = String(request.id ?? '');
    if (problem.kind === 'unexpected') log.error({ err: error, requestId }, 'unexpected failure');
    const document = problem.toDocument(requestId);
    response.status(document.status).type('application/problem+json').send(JSON.stringify(document));
  };
}
