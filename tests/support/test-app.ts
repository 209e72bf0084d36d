import type { Express } from 'express';
import { pino } from 'pino';
import request from 'supertest';
import type { AppContext, MailMessage } from '../../server/app-context.js';
import { createApp } from '../../server/app.js';
import { initModels } from '../../server/models/init-models.js';
import type { User } from '../../server/models/user.js';
import { ACCESS_COOKIE, REFRESH_COOKIE } from '../../server/sessions/cookies.js';
import { startSession } from '../../server/sessions/start-session.js';
import { createTestConfig } from './config.js';
import { createTestDatabase } from './database.js';

export interface TestApp {
  readonly app: Express;
  readonly context: AppContext;
  /** Mails that the app sent, oldest first. */
  readonly mails: MailMessage[];
  /** Sends requests as this person, on a session of its own; without one, as nobody. */
  readonly as: (user?: User) => Promise<TestClient>;
  readonly close: () => Promise<void>;
}

/** The app on a fresh database. Parts of the context can be given, such as an engine. */
export async function createTestApp(overrides: Partial<AppContext> = {}): Promise<TestApp> {
  const database = await createTestDatabase();
  initModels(database.sequelize);
  const mails: MailMessage[] = [];
  const context: AppContext = {
    config: createTestConfig(),
    sequelize: database.sequelize,
    logger: pino({ level: 'silent' }),
    mailer: { send: (message) => Promise.resolve(void mails.push(message)), close: () => undefined },
    ...overrides,
  };
  const app = createApp(context);
  return {
    app,
    context,
    mails,
    as: async (user) => {
      if (user === undefined) return new TestClient(app, []);
      const { tokens } = await context.sequelize.transaction((transaction) =>
        startSession(transaction, context.config.secrets.tokenKey, user.id, 'test'),
      );
      return new TestClient(app, [`${ACCESS_COOKIE}=${tokens.access}`, `${REFRESH_COOKIE}=${tokens.refresh}`]);
    },
    close: database.drop,
  };
}

type Method = 'get' | 'post' | 'patch' | 'delete';

/** Sends requests below /api/v1 the way the client does. */
export class TestClient {
  constructor(
    private readonly app: Express,
    readonly cookies: readonly string[],
  ) {}

  get(path: string): request.Test {
    return this.send('get', path);
  }
  post(path: string, body?: object): request.Test {
    return this.send('post', path, body);
  }
  patch(path: string, body?: object): request.Test {
    return this.send('patch', path, body);
  }
  delete(path: string): request.Test {
    return this.send('delete', path);
  }

  private send(method: Method, path: string, body?: object): request.Test {
    const test = request(this.app)[method](`/api/v1${path}`).set('X-Isoloom-Request', '1');
    if (this.cookies.length > 0) void test.set('Cookie', this.cookies.join('; '));
    return body === undefined ? test : test.send(body);
  }
}

/** The cookies an answer sets, ready to be sent back; cleared ones are left out. */
export function cookiesOf(response: request.Response): string[] {
  const lines = (response.headers['set-cookie'] as unknown as string[] | undefined) ?? [];
  return lines.map((line) => line.split(';')[0]).filter((pair) => !pair.endsWith('='));
}
