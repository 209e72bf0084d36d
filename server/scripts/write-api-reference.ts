import { mkdirSync, writeFileSync } from 'node:fs';
import { apiReference } from './api-reference-source.js';

/** `npm run api-docs` */
const target = new URL('../routes/API.md', import.meta.url);
mkdirSync(new URL('.', target), { recursive: true });
writeFileSync(target, apiReference());
console.log('Wrote server/routes/API.md');
