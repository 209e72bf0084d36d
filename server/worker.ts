import { RedisUnreachable } from './compute/redis/redis-connection.js';
import { ConfigError } from './config/environment-values.js';
import { parseWorkerEnvironment } from './config/worker-config.js';
import { runUntilSignal } from './run-until-signal.js';
import { DatabaseNotReady, startWorker } from './start-worker.js';

/** A worker as `npm run worker` runs it. */
runUntilSignal({
  start: async (shutdown) => {
    const config = parseWorkerEnvironment(process.env);
    await startWorker(config, shutdown);
    console.log(
      `Isoloom worker: ${config.computeThreads} threads take shards of runs.\nCtrl-C stops it; what is under way goes to other workers.`,
    );
  },
  explain,
});

function explain(error: unknown): unknown {
  if (error instanceof ConfigError) return `The environment has a value that does not fit:\n${error.message}`;
  if (error instanceof RedisUnreachable || error instanceof DatabaseNotReady) return error.message;
  return error;
}
