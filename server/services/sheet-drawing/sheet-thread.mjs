import { register } from 'tsx/esm/api';

// A thread begins without the loader that its process may have.
register();
await import('./sheet-worker.ts');
