import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';

export type Method = 'GET' | 'POST' | 'DELETE';

/** One route as its file under src/pages makes it. */
export interface RouteFile {
  /** Such as `/commissions/[ref]`. */
  pattern: string;
  methods: Method[];
  /** Built once, for everybody alike. */
  prerendered: boolean;
}

/** Every route the product has, from the folder of pages itself. */
export function routeFiles(folder = 'src/pages'): RouteFile[] {
  return readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((file) => /\.(astro|ts)$/.test(file))
    .map((file) => routeOf(file, readFileSync(join(folder, file), 'utf8')))
    .sort((a, b) => a.pattern.localeCompare(b.pattern));
}

function routeOf(file: string, text: string): RouteFile {
  const pattern = `/${file.replace(/\.(astro|ts)$/, '').replace(/(^|\/)index$/, '')}`;
  const prerendered = !/export const prerender = false/.test(text);
  const methods: Method[] = file.endsWith('.astro')
    ? ['GET']
    : [...text.matchAll(/export (?:const|function|async function) (GET|POST|DELETE|PUT|PATCH|ALL)\b/g)].map(
        (match) => match[1] as Method,
      );
  return { pattern, methods, prerendered };
}
