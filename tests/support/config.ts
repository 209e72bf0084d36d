import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type Config, parseEnvironment } from '../../server/config/config.js';
import { createSecrets } from '../../server/config/secrets.js';

/** A configuration with secrets of its own and nothing from the machine's environment. */
export function createTestConfig(overrides: Partial<Config> = {}): Config {
  const environment = parseEnvironment({ NODE_ENV: 'test', LOG_LEVEL: 'silent', DEMO: 'false', COMPUTE_THREADS: '1' });
  return { ...environment, dataDirectory: join(tmpdir(), `isoloom-test-${process.pid}`), secrets: createSecrets(), ...overrides };
}

/** An empty folder that stands for a data folder; the test removes it. */
export function createTemporaryFolder(): string {
  return mkdtempSync(join(tmpdir(), 'isoloom-test-'));
}
