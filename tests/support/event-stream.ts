import { once } from 'node:events';
import { createServer, get, type IncomingMessage, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { TestApp, TestClient } from './test-app.js';

export interface StreamedEvent {
  readonly event: string;
  readonly data: unknown;
}
export interface EventStream {
  readonly status: number;
  readonly headers: IncomingMessage['headers'];
  readonly events: StreamedEvent[];
  /** Everything that came, comments included. */
  text(): string;
  /** Resolves when the server has closed the stream. */
  readonly ended: Promise<void>;
  close(): void;
}

/** The app behind a real port: supertest waits for the end of an answer, and a stream has none. */
export async function listen(testApp: TestApp): Promise<Server> {
  const server = createServer(testApp.app);
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  return server;
}

/** Opens an event stream below /api/v1 the way a browser does: with gzip accepted. */
export async function openStream(
  server: Server,
  client: TestClient,
  path: string,
  headers: Record<string, string> = {},
): Promise<EventStream> {
  const { port } = server.address() as AddressInfo;
  const request = get({
    host: '127.0.0.1',
    port,
    path: `/api/v1${path}`,
    headers: { Cookie: client.cookies.join('; '), Accept: 'text/event-stream', 'Accept-Encoding': 'gzip', ...headers },
  });
  const [response] = (await once(request, 'response')) as [IncomingMessage];
  const events: StreamedEvent[] = [];
  let all = '';
  let rest = '';
  response.setEncoding('utf8');
  response.on('data', (chunk: string) => {
    all += chunk;
    const blocks = (rest + chunk).split('\n\n');
    rest = blocks.pop() ?? '';
    for (const block of blocks) {
      const event = /^event: (.*)$/m.exec(block)?.[1];
      const data = /^data: (.*)$/m.exec(block)?.[1];
      if (event !== undefined && data !== undefined) events.push({ event, data: JSON.parse(data) });
    }
  });
  return {
    status: response.statusCode ?? 0,
    headers: response.headers,
    events,
    text: () => all,
    ended: once(response, 'close').then(() => undefined),
    close: () => request.destroy(),
  };
}
