import type { Request, RequestHandler, Response, Router } from 'express';
import type { z } from 'zod';
import { endpoints, type Endpoint, type EndpointName } from '../../shared/schemas/endpoints.js';
import type { AppContext } from '../app-context.js';
import { authenticate } from '../middleware/authentication.js';
import type { RateLimitName } from '../middleware/rate-limits.js';
import type { Actor } from '../policies/actor.js';
import { parseRequest } from './parse-input.js';

type Part<N extends EndpointName, P extends 'params' | 'query' | 'body'> = (typeof endpoints)[N] extends {
  readonly [K in P]: infer S extends z.ZodType;
}
  ? z.output<S>
  : undefined;
/** What a handler returns: the response before its schema has looked at it; nothing where there is no schema. */
type Answer<N extends EndpointName> = (typeof endpoints)[N] extends { readonly response: infer S extends z.ZodType } ? z.input<S> : void;

export interface PublicInput<N extends EndpointName> {
  readonly params: Part<N, 'params'>;
  readonly query: Part<N, 'query'>;
  readonly body: Part<N, 'body'>;
  readonly request: Request;
  readonly response: Response;
}
export interface SignedInInput<N extends EndpointName> extends PublicInput<N> {
  readonly actor: Actor;
}

/** An endpoint with its handler, ready to be mounted. */
export interface Route {
  readonly name: EndpointName;
  readonly isPublic: boolean;
  readonly handle: (context: AppContext) => RequestHandler;
  /** Counted before anything else is done. */
  readonly limit?: RateLimitName;
}

interface RouteOptions {
  /** Default: 200 with a response schema, 204 without. */
  readonly status?: 201 | 202;
  readonly limit?: RateLimitName;
}

/** A route for signed-in people. Parses by the endpoint's schemas before the handler, serialises by them after it. */
export function route<N extends EndpointName>(
  name: N,
  handler: (input: SignedInInput<N>) => Promise<Answer<N>>,
  options: RouteOptions = {},
): Route {
  return {
    ...limitOf(options),
    name,
    isPublic: false,
    handle: (context) => async (request, response) => {
      const actor = await authenticate(context, request);
      await send(name, response, await handler({ ...parsePublicInput(name, request, response), actor }), options);
    },
  };
}

/** A route that anybody may call. */
export function publicRoute<N extends EndpointName>(
  name: N,
  handler: (input: PublicInput<N>) => Promise<Answer<N>>,
  options: RouteOptions = {},
): Route {
  return {
    ...limitOf(options),
    name,
    isPublic: true,
    handle: () => async (request, response) => {
      await send(name, response, await handler(parsePublicInput(name, request, response)), options);
    },
  };
}

/** A route for signed-in people whose handler writes the response itself: a file or an event stream. */
export function streamRoute<N extends EndpointName>(name: N, handler: (input: SignedInInput<N>) => Promise<void>): Route {
  return {
    name,
    isPublic: false,
    handle: (context) => async (request, response) => {
      const actor = await authenticate(context, request);
      await handler({ ...parsePublicInput(name, request, response), actor });
    },
  };
}

const limitOf = ({ limit }: RouteOptions): Pick<Route, 'limit'> => (limit === undefined ? {} : { limit });

function parsePublicInput<N extends EndpointName>(name: N, request: Request, response: Response): PublicInput<N> {
  // Each part is the output of the schema that `Part` reads from the same table.
  const endpoint: Endpoint = endpoints[name];
  const parts = parseRequest(endpoint, request) as Pick<PublicInput<N>, 'params' | 'query' | 'body'>;
  return { ...parts, request, response };
}

/** The schema also strips what it does not name, so that no column reaches a client by accident. */
async function send(name: EndpointName, response: Response, answer: unknown, options: RouteOptions): Promise<void> {
  const endpoint: Endpoint = endpoints[name];
  if (endpoint.response === undefined) {
    response.status(204).end();
    return;
  }
  response.status(options.status ?? 200).json(await endpoint.response.parseAsync(answer));
}

const ROUTER_METHODS = { GET: 'get', POST: 'post', PATCH: 'patch', DELETE: 'delete' } as const;

/** Mounts routes by method and path of the endpoint table. */
export function mountRoutes(
  router: Router,
  context: AppContext,
  routes: readonly Route[],
  limits: Readonly<Record<RateLimitName, RequestHandler>>,
): void {
  for (const { name, handle, limit } of routes) {
    const endpoint: Endpoint = endpoints[name];
    router[ROUTER_METHODS[endpoint.method]](endpoint.path, ...(limit === undefined ? [] : [limits[limit]]), handle(context));
  }
}
