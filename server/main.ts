import { loadConfig } from './config/config.js';
import { ConfigError } from './config/environment-values.js';
import { RedisUnreachable } from './compute/redis/redis-connection.js';
import { DataFolderInUse } from './database/data-folder-lock.js';
import { MariadbError } from './database/mariadb-process.js';
import { runUntilSignal } from './run-until-signal.js';
import { type StartedServer, startServer } from './start-server.js';

/** The server as `npm start` runs it. */
runUntilSignal({
  start: async (shutdown) => {
    const config = loadConfig(process.env);
    printWelcome(await startServer({ config, shutdown, announce: (line) => console.log(line) }));
  },
  explain,
});

function printWelcome({ context, firstAdmin }: StartedServer): void {
  const { config, demoAccounts = [] } = context;
  if (firstAdmin !== null)
    console.log(`\nFirst admin; write the password down, it is shown only now:\n  ${firstAdmin.email}  ${firstAdmin.password}`);
  if (demoAccounts.length > 0) {
    console.log('\nDemo accounts of an invented laboratory:');
    const width = Math.max(...demoAccounts.map(({ email }) => email.length));
    for (const { email, password, role } of demoAccounts) console.log(`  ${email.padEnd(width)}  ${password}  (${role})`);
  }
  console.log(`\nIsoloom is running: ${config.publicUrl}\nCtrl-C stops it.`);
}

/** What the person who started the server can act on is said in one line; anything else is a fault and shown in full. */
function explain(error: unknown): unknown {
  if (error instanceof ConfigError) return `The environment has a value that does not fit:\n${error.message}`;
  if (error instanceof MariadbError || error instanceof DataFolderInUse || error instanceof RedisUnreachable) return error.message;
  const code = error instanceof Error ? (error as NodeJS.ErrnoException).code : undefined;
  if (code === 'EADDRINUSE') return `Port ${process.env.PORT ?? '3210'} is taken by another program. Choose another one with PORT.`;
  if (code === 'EACCES') return `Not allowed to listen on port ${process.env.PORT ?? '3210'}. Choose one above 1023 with PORT.`;
  return error;
}
