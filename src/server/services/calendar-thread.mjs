// A thread begins without the loader that reads TypeScript; where the program has it already, this does nothing more.
import { register } from 'tsx/esm/api';

register();
await import('./calendar-thread.ts');
