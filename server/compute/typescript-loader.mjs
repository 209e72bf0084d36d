// Lets a worker thread load TypeScript. `--import tsx` registers itself in the main thread only on Node 20.
import { register } from 'tsx/esm/api';

register();
