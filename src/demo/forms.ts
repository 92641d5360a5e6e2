import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Drawing } from '../casting/drawing';
import { formSchema } from '../commission/pricing/form';

/** The drawing of one form of the catalogue, from its file under `<content>/forms`. */
export function drawingOf(contentFolder: string, slug: string): Drawing {
  return formSchema.parse(JSON.parse(readFileSync(join(contentFolder, 'forms', `${slug}.json`), 'utf8'))).drawing;
}
