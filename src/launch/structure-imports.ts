import { dirname, join } from 'node:path';
import type { SourceFile } from './structure';

const IMPORT =
  /(?:^|\n)\s*(?:import|export)\s(?!type\s)[^'"\n;]*?(?:\{[^}]*\}[^'"\n;]*?)?from\s*['"](\.[^'"]+)['"]|import\(\s*['"](\.[^'"]+)['"]/g;
const ENDINGS = ['', '.ts', '.tsx', '.mjs', '.astro', '/index.ts'];

type Graph = Map<string, string[]>;

/** What each file imports of ours at run time; `import type` leaves no trace there. */
export function importGraph(files: SourceFile[]): Graph {
  const known = new Set(files.map(({ path }) => path));
  return new Map(
    files.map(({ path, text }) => {
      const named = [...text.matchAll(IMPORT)].map((match) => join(dirname(path), match[1] ?? match[2] ?? ''));
      const found = named.flatMap((name) => ENDINGS.map((ending) => name + ending).filter((file) => known.has(file)));
      return [path, [...new Set(found)]];
    }),
  );
}

/** Files that import each other in a ring. */
export function cycleProblems(files: SourceFile[]): string[] {
  const graph = importGraph(files);
  const done = new Set<string>();
  const problems: string[] = [];
  const walk = (file: string, trail: string[]): void => {
    const at = trail.indexOf(file);
    if (at >= 0) problems.push(`These files import each other: ${[...trail.slice(at), file].join(' > ')}`);
    if (at >= 0 || done.has(file)) return;
    for (const next of graph.get(file) ?? []) walk(next, [...trail, file]);
    done.add(file);
  };
  for (const file of graph.keys()) walk(file, []);
  return problems;
}

/** The room of a file: the first folder under `src`, or `fakes`, or `tests`. */
function roomOf(path: string): string {
  const [top = '', room = ''] = path.split('/');
  return top === 'src' ? (path.split('/').length > 2 ? room : 'src') : top;
}

/** Rooms that import each other, and pure rooms that import what is not pure. */
export function roomProblems(files: SourceFile[]): string[] {
  const doors = new Map<string, string>();
  for (const [file, targets] of importGraph(files)) {
    for (const target of targets) {
      const [from, to] = [roomOf(file), roomOf(target)];
      if (from !== to && from !== 'src') doors.set(`${from} ${to}`, file);
    }
  }
  const problems: string[] = [];
  for (const [door, file] of doors) {
    const [from = '', to = ''] = door.split(' ');
    const back = doors.get(`${to} ${from}`);
    if (back && from < to) problems.push(`Rooms ${from} and ${to} import each other: ${file}, ${back}`);
    const allowed = PURE[from];
    if (allowed && !allowed.includes(to)) problems.push(`${file}: the pure room ${from} must not import from ${to}.`);
    if (from !== 'tests' && to === 'tests') problems.push(`${file}: only tests import from tests.`);
    if (from !== 'tests' && to === 'fakes') problems.push(`${file}: the fakes stand outside; run them as a child.`);
  }
  return problems;
}

const PURE: Record<string, string[]> = { casting: [], commission: ['casting'] };
