import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { build, preview } from 'vite';

const root = fileURLToPath(new URL('../../..', import.meta.url));

export interface ClientServer {
  readonly url: string;
  close(): Promise<void>;
}

/** Builds the client into a folder of its own and serves it, without any API: tests answer for that. */
export async function startClientServer(): Promise<ClientServer> {
  const outDir = await mkdtemp(path.join(tmpdir(), 'isoloom-client-'));
  await build({ root, logLevel: 'error', build: { outDir, emptyOutDir: true } });
  const server = await preview({ root, logLevel: 'error', build: { outDir }, preview: { host: '127.0.0.1', port: 0, proxy: {} } });
  const url = server.resolvedUrls?.local[0];
  if (url === undefined) throw new Error('the preview server has no address');
  return {
    url: url.replace(/\/$/, ''),
    async close() {
      await server.close();
      await rm(outDir, { recursive: true, force: true });
    },
  };
}
