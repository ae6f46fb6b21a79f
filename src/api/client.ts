import type { z } from 'zod';
import { Problem } from '../../shared/api/resources';

/** What the server said no to, in its own words. */
export class ApiError extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    readonly detail: string,
    readonly errors: { path: string; message: string }[] = [],
  ) {
    super(detail);
  }
}

const AWAY = 'The server does not answer. Check that it runs, then try again.';
/** What a proxy in front answers while the server behind it is away. */
const GATEWAY_STATUSES = [502, 503, 504];

/** Told when the server no longer knows who we are. */
let onSignedOut: () => void = () => {};
export function whenSignedOut(listener: () => void): void {
  onSignedOut = listener;
}

async function call<S extends z.ZodType>(
  method: string,
  path: string,
  schema: S | null,
  body?: unknown,
  signal?: AbortSignal,
): Promise<z.output<S>> {
  let response: Response;
  try {
    response = await fetch(`/api${path}`, {
      method,
      signal,
      credentials: 'same-origin',
      headers: body === undefined ? {} : { 'Content-Type': 'application/json' },
      body: body === undefined ? undefined : JSON.stringify(body),
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ApiError(0, 'offline', AWAY);
  }
  if (!response.ok) throw await asError(response);
  if (schema === null || response.status === 204) return undefined as z.output<S>;
  return schema.parse(await response.json());
}

async function asError(response: Response): Promise<ApiError> {
  const parsed = Problem.safeParse(await response.json().catch(() => null));
  if (response.status === 401 && (!parsed.success || parsed.data.code === 'notSignedIn')) onSignedOut();
  if (!parsed.success && GATEWAY_STATUSES.includes(response.status))
    return new ApiError(response.status, 'offline', AWAY);
  if (!parsed.success)
    return new ApiError(
      response.status,
      'unknown',
      `The server answered ${response.status} without saying why.`,
    );
  const { status, code, detail, errors } = parsed.data;
  return new ApiError(status, code, detail, errors);
}

/** The one way to the HTTP API: JSON, same origin, answers parsed by the shared schemas, no toasts. */
export const api = {
  get: <S extends z.ZodType>(path: string, schema: S, options?: { signal?: AbortSignal }) =>
    call('GET', path, schema, undefined, options?.signal),
  post: <S extends z.ZodType>(path: string, body: unknown, schema: S | null) =>
    call('POST', path, schema, body ?? {}),
  put: <S extends z.ZodType>(path: string, body: unknown, schema: S | null) =>
    call('PUT', path, schema, body),
  patch: <S extends z.ZodType>(path: string, body: unknown, schema: S | null) =>
    call('PATCH', path, schema, body),
  delete: (path: string) => call('DELETE', path, null),
};

/** Words for any error that a screen shows. */
export function errorText(error: unknown): string {
  if (error instanceof ApiError) return error.detail;
  return 'The server’s answer was not understood. Load the page again.';
}
