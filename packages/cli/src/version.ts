import { createRequire } from 'node:module';

/** Version of the package, as its manifest says. */
export const VERSION: string = (createRequire(import.meta.url)('../package.json') as { version: string }).version;
