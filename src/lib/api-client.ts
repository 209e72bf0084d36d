import type { z } from 'zod';
import { endpoints, type Endpoint, type EndpointName } from '../../shared/schemas/endpoints';
import { problemResponse } from '../../shared/schemas/problem';
import { ApiError } from './api-error';
import { announceSessionExpired } from './session-events';

const API_PREFIX = '/api/v1';

type EndpointOf<N extends EndpointName> = (typeof endpoints)[N];

/** Names of the `:parts` of a path. */
type PathPart<P extends string> = P extends `${string}:${infer Part}/${infer Rest}`
  ? Part | PathPart<`/${Rest}`>
  : P extends `${string}:${infer Part}`
    ? Part
    : never;
type Params<N extends EndpointName> = PathPart<EndpointOf<N>['path']>;
type Slot<K extends string, Value> = [Value] extends [never] ? { [P in K]?: never } : { [P in K]: Value };
type QueryInput<N extends EndpointName> = EndpointOf<N> extends { query: infer Q extends z.ZodType } ? z.input<Q> : never;
type BodyInput<N extends EndpointName> = EndpointOf<N> extends { body: infer B extends z.ZodType } ? z.input<B> : never;

type ParamsSlot<N extends EndpointName> = Slot<'params', [Params<N>] extends [never] ? never : Record<Params<N>, string>>;
/** Every query has defaults, so it may be left out altogether. */
type QuerySlot<N extends EndpointName> = { query?: Partial<QueryInput<N>> };
type BodySlot<N extends EndpointName> = Slot<'body', BodyInput<N>>;

export type CallOptions<N extends EndpointName> = ParamsSlot<N> & QuerySlot<N> & BodySlot<N> & { signal?: AbortSignal };
export type EndpointResponse<N extends EndpointName> = EndpointOf<N> extends { response: infer R extends z.ZodType } ? z.output<R> : void;

type Arguments<N extends EndpointName> =
  Record<never, never> extends CallOptions<N> ? [options?: CallOptions<N>] : [options: CallOptions<N>];

interface RawOptions {
  params?: Readonly<Record<string, string>>;
  query?: Readonly<Record<string, unknown>>;
  body?: unknown;
  signal?: AbortSignal;
}

function buildUrl(path: string, options: RawOptions): string {
  const filled = path.replace(/:(\w+)/g, (_, part: string) => {
    const value = options.params?.[part];
    if (value === undefined) throw new TypeError(`missing path parameter ${part} of ${path}`);
    return encodeURIComponent(value);
  });
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(options.query ?? {})) {
    if (value !== undefined && value !== null) search.set(key, String(value));
  }
  const text = search.toString();
  return `${API_PREFIX}${filled}${text === '' ? '' : `?${text}`}`;
}

/** Address of an endpoint, for event streams and file links, which the browser fetches itself. */
export function endpointUrl<N extends EndpointName>(
  name: N,
  ...rest: Record<never, never> extends ParamsSlot<N> ? [options?: ParamsSlot<N> & QuerySlot<N>] : [options: ParamsSlot<N> & QuerySlot<N>]
): string {
  return buildUrl(endpoints[name].path, (rest[0] ?? {}) as RawOptions);
}

async function send(endpoint: Endpoint, options: RawOptions): Promise<Response> {
  const init: RequestInit = {
    method: endpoint.method,
    credentials: 'same-origin',
    // The server asks for this header on every change: a foreign page cannot send it.
    headers: {
      Accept: 'application/json',
      'X-Isoloom-Request': '1',
      ...(options.body === undefined ? {} : { 'Content-Type': 'application/json' }),
    },
    ...(options.body === undefined ? {} : { body: JSON.stringify(options.body) }),
    ...(options.signal === undefined ? {} : { signal: options.signal }),
  };
  try {
    return await fetch(buildUrl(endpoint.path, options), init);
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new ApiError({ status: 0, code: 'noConnection', message: 'The server cannot be reached. Check the connection and try again.' });
  }
}

let refreshing: Promise<boolean> | null = null;

/**
 * Exchanges the refresh cookie once for all calls that wait; false when the session has ended. Tabs take turns through a lock, because a refresh
 * token used twice counts as stolen and ends the session.
 */
function refreshSession(): Promise<boolean> {
  const exchange = async () => {
    const response = await send(endpoints.refreshSession, {});
    if (response.ok) return true;
    // A server that stumbles does not end the session.
    if (response.status !== 401 && response.status !== 403) throw await failure(response);
    return false;
  };
  refreshing ??= ('locks' in navigator ? navigator.locks.request('isoloom-session-refresh', exchange) : exchange()).finally(() => {
    refreshing = null;
  });
  return refreshing;
}

async function failure(response: Response): Promise<ApiError> {
  const body: unknown = await response.json().catch(() => null);
  const problem = problemResponse.safeParse(body);
  if (problem.success) return new ApiError({ status: response.status, ...problem.data.error });
  return new ApiError({
    status: response.status,
    code: 'unexpectedResponse',
    message: `The server answered with status ${response.status}. Try again in a moment.`,
  });
}

/** Signing in is where a 401 means a wrong password, not an old session. */
const WITHOUT_SESSION: ReadonlySet<EndpointName> = new Set([
  'readInstallation',
  'signIn',
  'signOut',
  'refreshSession',
  'requestPasswordReset',
  'resetPassword',
  'readInvitation',
  'acceptInvitation',
]);

/**
 * Calls one endpoint of the API table and returns the parsed response.
 *
 * @throws ApiError for every answer that is not a success, and with status 0 when none arrived.
 */
export async function callEndpoint<N extends EndpointName>(name: N, ...rest: Arguments<N>): Promise<EndpointResponse<N>> {
  const endpoint: Endpoint = endpoints[name];
  const options = (rest[0] ?? {}) as RawOptions;
  let response = await send(endpoint, options);
  if (response.status === 401 && !WITHOUT_SESSION.has(name)) {
    if (await refreshSession()) response = await send(endpoint, options);
    if (response.status === 401 && name !== 'me') announceSessionExpired();
  }
  if (!response.ok) throw await failure(response);
  if (endpoint.response === undefined || response.status === 204) return undefined as EndpointResponse<N>;
  const parsed = endpoint.response.safeParse(await response.json().catch(() => null));
  if (!parsed.success) {
    throw new ApiError({
      status: response.status,
      code: 'unexpectedResponse',
      message: 'The server sent something this page does not understand. Reload the page.',
    });
  }
  // The schema of the table has just proved the shape that EndpointResponse derives from it.
  return parsed.data as EndpointResponse<N>;
}
