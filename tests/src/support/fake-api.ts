import type { Page, Route } from 'playwright-core';
import type { z } from 'zod';
import { endpoints, type Endpoint, type EndpointName } from '../../../shared/schemas/endpoints';

type Reply<N extends EndpointName> = (typeof endpoints)[N] extends { response: infer R extends z.ZodType } ? z.input<R> : undefined;

export interface FakeRequest {
  readonly params: Readonly<Record<string, string>>;
  readonly query: URLSearchParams;
  readonly body: unknown;
}
type Handler<N extends EndpointName> = (request: FakeRequest) => Reply<N> | FakeProblem;
export type FakeHandlers = { [N in EndpointName]?: Handler<N> };

/** An answer that is not a success. */
export class FakeProblem {
  constructor(
    readonly status: number,
    readonly error: { code: string; message: string; issues?: Array<{ path: string; message: string }>; figures?: Record<string, number> },
  ) {}
}

const matchers = (Object.entries(endpoints) as Array<[EndpointName, Endpoint]>)
  .map(([name, endpoint]) => ({
    name,
    endpoint,
    // Literal paths before patterns, as Express would be told.
    weight: endpoint.path.split(':').length,
    pattern: new RegExp(`^/api/v1${endpoint.path.replace(/:(\w+)/g, '(?<$1>[^/]+)')}$`),
  }))
  .sort((a, b) => a.weight - b.weight);

/**
 * Answers the API calls of a page from handlers. Replies are checked against the API table, so that a fake cannot
 * promise what the server never sends. A call without a handler answers 404 and is noted in `unanswered`.
 */
export class FakeApi {
  readonly calls: Array<{ name: EndpointName; request: FakeRequest }> = [];
  readonly unanswered: string[] = [];

  constructor(private readonly handlers: FakeHandlers) {}

  on<N extends EndpointName>(name: N, handler: Handler<N>): void {
    (this.handlers as Record<string, unknown>)[name] = handler;
  }

  async attach(page: Page): Promise<void> {
    await page.route('**/api/v1/**', (route) => this.answer(route));
  }

  callsOf(name: EndpointName): FakeRequest[] {
    return this.calls.filter((call) => call.name === name).map((call) => call.request);
  }

  private async answer(route: Route): Promise<void> {
    const request = route.request();
    const url = new URL(request.url());
    const found = matchers.find(({ endpoint, pattern }) => endpoint.method === request.method() && pattern.test(url.pathname));
    const handler = found === undefined ? undefined : (this.handlers[found.name] as ((request: FakeRequest) => unknown) | undefined);
    if (found === undefined || handler === undefined) {
      this.unanswered.push(`${request.method()} ${url.pathname}`);
      await route.fulfill({ status: 404, json: { error: { code: 'notFound', message: 'Nothing is kept at this address.' } } });
      return;
    }
    const fake: FakeRequest = {
      params: { ...(found.pattern.exec(url.pathname)?.groups ?? {}) },
      query: url.searchParams,
      body: request.postData() === null ? undefined : (request.postDataJSON() as unknown),
    };
    this.calls.push({ name: found.name, request: fake });
    const reply = handler(fake);
    if (reply instanceof FakeProblem) {
      await route.fulfill({ status: reply.status, json: { error: reply.error } });
    } else if (found.endpoint.response === undefined) {
      await route.fulfill({ status: 204 });
    } else {
      await route.fulfill({ status: 200, json: found.endpoint.response.parse(reply) });
    }
  }
}
