/** Writes docs/schemas from the readers of documents (after a build); a test keeps the two the same. */
import { writeFileSync } from 'node:fs';
import { z } from 'zod';
import { profileSchema } from '../dist/profile-reader.js';

writeFileSync(
  new URL('../../../docs/schemas/profile-1.json', import.meta.url),
  `${JSON.stringify(z.toJSONSchema(profileSchema), null, 2)}\n`,
);
