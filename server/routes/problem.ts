import type { ErrorRequestHandler, RequestHandler } from 'express';
import { ZodError } from 'zod';
import type { Problem } from '../../shared/api/resources';

/** An error a person can do something about; becomes RFC 9457 problem details. */
export class HttpProblem extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    readonly detail: string,
    readonly errors?: { path: string; message: string }[],
  ) {
    super(detail);
  }
}

const TITLES: Record<number, string> = {
  400: 'Not understood',
  401: 'Not signed in',
  403: 'Not allowed',
  404: 'Not there',
  405: 'Not possible here',
  409: 'Conflict',
  410: 'Gone',
  413: 'Too large',
  415: 'Wrong kind',
  421: 'Wrong host',
  429: 'Too often',
  500: 'Server error',
  503: 'Not ready',
};

function asProblem(error: unknown): HttpProblem | null {
  if (error instanceof HttpProblem) return error;
  if (error instanceof ZodError) {
    const errors = error.issues.map(({ path, message }) => ({ path: path.map(String).join('.'), message }));
    const first = errors[0];
    return new HttpProblem(
      400,
      'badInput',
      first ? `${first.path || 'input'}: ${first.message}` : 'Not understood.',
      errors,
    );
  }
  // What the body parser throws: its status and type say enough, its text may quote the input.
  const { type, status } = (error ?? {}) as { type?: string; status?: number };
  if (type === 'entity.too.large')
    return new HttpProblem(413, 'tooLarge', 'That is more than this server takes at once.');
  if (type?.startsWith('entity.'))
    return new HttpProblem(400, 'badJson', 'The request is not well-formed JSON.');
  if (status && status >= 400 && status < 500)
    return new HttpProblem(status, 'badRequest', 'The request is not well-formed.');
  return null;
}

/** The one place that decides what an error looks like outside. Nothing of its inside gets out. */
export function problemHandler(log: { error(details: object, message: string): void }): ErrorRequestHandler {
  return (error, request, response, next) => {
    const known = asProblem(error);
    if (!known) log.error({ err: error, path: request.path }, 'a request failed');
    if (response.headersSent) return next(error);
    const problem =
      known ??
      new HttpProblem(500, 'serverError', 'Something went wrong on the server. Nothing was changed.');
    const body: Problem = {
      type: 'about:blank',
      title: TITLES[problem.status] ?? 'Error',
      status: problem.status,
      code: problem.code,
      detail: problem.detail,
      ...(problem.errors ? { errors: problem.errors } : {}),
    };
    response.status(problem.status).type('application/problem+json').send(JSON.stringify(body));
  };
}

export const noSuchRoute: RequestHandler = (_request, _response, next) =>
  next(new HttpProblem(404, 'noSuchAddress', 'There is nothing at this address.'));
