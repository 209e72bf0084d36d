// @ts-check
/**
 * Runs before `npm start`, `npm run dev`, `npm run worker` and `npm test`: brings in what is missing, so that one command is enough on a
 * fresh clone. Plain JavaScript without packages, because it runs before there are any.
 */
import { ensureDebianPackages } from './debian-packages.mjs';
import { ensureNodePackages } from './node-packages.mjs';

const purpose = process.argv[2];
if (purpose !== 'start' && purpose !== 'dev' && purpose !== 'worker' && purpose !== 'test') {
  console.error('Usage: node server/scripts/ensure.mjs start|dev|worker|test');
  process.exit(2);
}

try {
  requireNode();
  await ensureNodePackages();
  // A worker cannot do without DATABASE_URL, and says so itself.
  if (purpose === 'test' || (purpose !== 'worker' && !process.env.DATABASE_URL))
    await ensureDebianPackages(['MariaDB'], { isRequired: true });
  // The browser tests say themselves that they need a browser; nauty is one of several oracles.
  if (purpose === 'test') {
    await ensureDebianPackages(['Chromium', 'nauty'], { isRequired: false });
    // On a machine of somebody who may not install it the tests of that queue are skipped; elsewhere none may be.
    await ensureDebianPackages(['Redis'], { isRequired: Boolean(process.env.CI) });
  }
  if (purpose === 'start' || purpose === 'worker') {
    const { buildIfStale } = await import('./build-product.mjs');
    await buildIfStale();
  }
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}

function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  const isSupported = (major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22;
  if (!isSupported) throw new Error(`Isoloom needs Node.js 20.19 or newer (or 22.12 or newer); this is ${process.versions.node}.`);
}
