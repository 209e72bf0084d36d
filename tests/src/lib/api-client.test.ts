import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { callEndpoint, endpointUrl } from '../../../src/lib/api-client';
import { ApiError, issueFor } from '../../../src/lib/api-error';
import { onSessionExpired } from '../../../src/lib/session-events';
import { ids, meAs, unknownRows } from '../support/fixtures';

type Answer = { status: number; body?: unknown };
let answers: Array<(url: string, init: RequestInit) => Answer | Error>;
let sent: Array<{ url: string; init: RequestInit }>;

beforeEach(() => {
  answers = [];
  sent = [];
  vi.stubGlobal('navigator', {});
  vi.stubGlobal('fetch', (url: string, init: RequestInit) => {
    sent.push({ url, init });
    const answer = answers.shift()?.(url, init);
    if (answer === undefined) return Promise.reject(new Error(`no answer prepared for ${url}`));
    if (answer instanceof Error) return Promise.reject(answer);
    return Promise.resolve(new Response(answer.body === undefined ? null : JSON.stringify(answer.body), { status: answer.status }));
  });
});
afterEach(() => {
  vi.unstubAllGlobals();
});

const unauthorized = () => ({ status: 401, body: { error: { code: 'noSession', message: 'Sign in to continue.' } } });
const me = () => ({ status: 200, body: meAs('chemist') });
const comments = () => ({ status: 200, body: { comments: [] } });

async function failureOf(call: Promise<unknown>): Promise<ApiError> {
  const error: unknown = await call.then(
    () => null,
    (thrown: unknown) => thrown,
  );
  expect(error).toBeInstanceOf(ApiError);
  return error as ApiError;
}

describe('a call', () => {
  it('fills the path, writes the query and marks itself as coming from the client', async () => {
    answers = [() => ({ status: 200, body: { rows: unknownRows, total: 6, page: 2, pageSize: 25 } })];
    const page = await callEndpoint('listUnknowns', { params: { teamId: ids.team }, query: { search: 'C10 H14', page: 2 } });
    expect(page.rows).toHaveLength(unknownRows.length);
    expect(sent[0].url).toBe(`/api/v1/teams/${ids.team}/unknowns?search=C10+H14&page=2`);
    expect(sent[0].init.headers).toMatchObject({ 'X-Isoloom-Request': '1' });
  });

  it('cannot be sent to another path by a parameter', () => {
    expect(endpointUrl('readRun', { params: { runId: '../users?x=1' } })).toBe('/api/v1/runs/..%2Fusers%3Fx%3D1');
  });

  it('passes an abort on instead of reporting a lost connection', async () => {
    answers = [() => new DOMException('aborted', 'AbortError')];
    await expect(callEndpoint('listComments', { params: { unknownId: ids.unknown } })).rejects.toMatchObject({ name: 'AbortError' });
  });

  it('says so when the server cannot be reached', async () => {
    answers = [() => new TypeError('Failed to fetch')];
    const error = await failureOf(callEndpoint('listComments', { params: { unknownId: ids.unknown } }));
    expect(error).toMatchObject({ status: 0, code: 'noConnection' });
  });

  it('carries code, issues and figures of a refusal', async () => {
    answers = [
      () => ({
        status: 422,
        body: {
          error: {
            code: 'badInput',
            message: 'Check the fields.',
            issues: [{ path: 'title', message: 'expected a title' }],
            figures: { limit: 3 },
          },
        },
      }),
    ];
    const error = await failureOf(callEndpoint('createUnknown', { params: { teamId: ids.team }, body: { title: '' } }));
    expect(error).toMatchObject({ status: 422, code: 'badInput', figures: { limit: 3 } });
    expect(issueFor(error, 'title')).toBe('expected a title');
    expect(issueFor(error, 'description')).toBeUndefined();
  });

  it('survives an answer that is no JSON', async () => {
    answers = [() => ({ status: 502, body: undefined })];
    expect(await failureOf(callEndpoint('listComments', { params: { unknownId: ids.unknown } }))).toMatchObject({
      status: 502,
      code: 'unexpectedResponse',
    });
  });

  it('refuses an answer that does not have the shape of the API table', async () => {
    answers = [() => ({ status: 200, body: { comments: [{ id: 'not an id' }] } })];
    expect(await failureOf(callEndpoint('listComments', { params: { unknownId: ids.unknown } }))).toMatchObject({
      code: 'unexpectedResponse',
    });
  });
});

describe('an old session', () => {
  it('is renewed once and the call repeated', async () => {
    answers = [unauthorized, me, comments];
    await expect(callEndpoint('listComments', { params: { unknownId: ids.unknown } })).resolves.toEqual({ comments: [] });
    expect(sent.map(({ url }) => url)).toEqual([
      `/api/v1/unknowns/${ids.unknown}/comments`,
      '/api/v1/session/refresh',
      `/api/v1/unknowns/${ids.unknown}/comments`,
    ]);
  });

  it('is renewed once for calls that fail together', async () => {
    answers = [unauthorized, unauthorized, me, comments, comments];
    const call = () => callEndpoint('listComments', { params: { unknownId: ids.unknown } });
    await Promise.all([call(), call()]);
    expect(sent.filter(({ url }) => url.endsWith('/session/refresh'))).toHaveLength(1);
  });

  it('is announced when it cannot be renewed', async () => {
    const expired = vi.fn();
    const stop = onSessionExpired(expired);
    answers = [unauthorized, unauthorized];
    expect(await failureOf(callEndpoint('listComments', { params: { unknownId: ids.unknown } }))).toMatchObject({ status: 401 });
    expect(expired).toHaveBeenCalledOnce();
    stop();
  });

  it('does not end because the server stumbles while renewing it', async () => {
    const expired = vi.fn();
    const stop = onSessionExpired(expired);
    answers = [unauthorized, () => ({ status: 503, body: { error: { code: 'busy', message: 'Try again in a moment.' } } })];
    expect(await failureOf(callEndpoint('listComments', { params: { unknownId: ids.unknown } }))).toMatchObject({
      status: 503,
      code: 'busy',
    });
    expect(expired).not.toHaveBeenCalled();
    stop();
  });

  it('is not what a wrong password means', async () => {
    const expired = vi.fn();
    const stop = onSessionExpired(expired);
    answers = [() => ({ status: 401, body: { error: { code: 'wrongPassword', message: 'E-mail or password is wrong.' } } })];
    expect(await failureOf(callEndpoint('signIn', { body: { email: 'a@b.example', password: 'x' } }))).toMatchObject({
      code: 'wrongPassword',
    });
    expect(expired).not.toHaveBeenCalled();
    expect(sent).toHaveLength(1);
    stop();
  });
});
