// @ts-check
import { buildIfStale } from './build-product.mjs';

/** `npm run build`: builds everything, up to date or not. */
await buildIfStale({ force: true });
