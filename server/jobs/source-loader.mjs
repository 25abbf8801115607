// Lets a worker thread import TypeScript while the server runs from its source: `--import tsx` reaches the main thread only.
import { register } from 'tsx/esm/api';

register();
