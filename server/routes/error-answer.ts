import type { ErrorRequestHandler, Response } from 'express';
import type {} from 'pino-http';
import { ERROR_STATUS } from '#server/error-status.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ErrorBody } from '#shared/api/error-body.ts';

const BUSY = new ServiceError('BUSY', 'The server is busy for a moment. Try again in a few seconds.', { retryAfterS: 5 });
const INTERNAL = new ServiceError(
  'INTERNAL',
  'Something went wrong here. Try again; if it goes on, tell whoever runs this server, with the request number.',
);

/** The one translator from failures to answers. What it does not know it hides, and leaves to the log. */
export function errorAnswer(isBusy: (error: unknown) => boolean): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    if (response.headersSent) return next(error);
    const failure = translate(error, isBusy);
    if (failure === INTERNAL || failure === BUSY) request.log.error({ err: error }, failure.code);
    sendFailure(response, failure, String(request.id));
  };
}

export function sendFailure(response: Response, failure: ServiceError, requestId: string): void {
  const { expected, faults, retryAfterS } = failure.details;
  if (retryAfterS !== undefined) response.set('retry-after', String(retryAfterS));
  const body: ErrorBody = {
    code: failure.code,
    message: failure.message,
    requestId,
    ...(expected === undefined ? {} : { expected }),
    ...(faults === undefined ? {} : { faults: [...faults] }),
  };
  response.status(ERROR_STATUS[failure.code]).json(body);
}

function translate(error: unknown, isBusy: (error: unknown) => boolean): ServiceError {
  if (error instanceof ServiceError) return error;
  const type = error instanceof Error && 'type' in error ? error.type : undefined;
  switch (type) {
    case 'entity.too.large':
      return new ServiceError('PAYLOAD_TOO_LARGE', 'That is more than the server takes at once.');
    case 'encoding.unsupported':
    case 'charset.unsupported':
      return new ServiceError('UNSUPPORTED_CONTENT_TYPE', 'Send the body uncompressed, as UTF-8.');
    case 'entity.parse.failed':
    case 'request.size.invalid':
    case 'request.aborted':
      return new ServiceError('INVALID_REQUEST', 'The body could not be read. Send it again.');
    default:
      if (error instanceof URIError) return new ServiceError('NOT_FOUND', 'There is nothing at this address.');
      return isBusy(error) ? BUSY : INTERNAL;
  }
}
