import { buildIfStale } from '../../server/scripts/build-product.mjs';

/** Global set-up of the browser tests: they drive the built product, as people do. */
export async function setup(): Promise<void> {
  await buildIfStale();
}
