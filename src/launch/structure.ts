import { readdirSync, readFileSync } from 'node:fs';
import { basename, extname, join, relative } from 'node:path';
import { cycleProblems, roomProblems } from './structure-imports';
import { functionProblems } from './structure-functions';

/** One source file as the structure check sees it. */
export interface SourceFile {
  /** From the project's folder, such as `src/casting/alloys.ts`. */
  path: string;
  text: string;
}

const ROOTS = ['src', 'fakes', 'tests'];
const CODE = new Set(['.ts', '.tsx', '.mjs', '.astro', '.css']);
const MAX_LINES = 300;

/** Names that say nothing about what is inside. */
const EMPTY_NAMES = /^(utils?|helpers?|lib|common|shared|types|misc|core|constants)$/;

/** Tables of figures, which are read as data: long, and with nothing to split. */
const DATA_TABLES = /\.(data|table)\.ts$/;

/** Everything about the shape of the source that breaks the rules of DEVELOPERS.md, a sentence each. */
export function structureProblems(root = '.'): string[] {
  const files = sourceFiles(root);
  return [
    ...files.flatMap(nameProblems),
    ...files.flatMap(lengthProblems),
    ...files.flatMap(functionProblems),
    ...cycleProblems(files),
    ...roomProblems(files),
  ];
}

/** Reads every code file under `src`, `fakes` and `tests`. */
export function sourceFiles(root: string): SourceFile[] {
  return ROOTS.flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile() && CODE.has(extname(entry.name)))
      .map((entry) => join(entry.parentPath, entry.name))
      .map((file) => ({ path: relative(root, file), text: readFileSync(file, 'utf8') })),
  );
}

function nameProblems({ path }: SourceFile): string[] {
  const parts = path.split('/');
  const names = [...parts.slice(0, -1), basename(path).split('.')[0] ?? ''];
  const empty = names.filter((name) => EMPTY_NAMES.test(name));
  return empty.map((name) => `${path}: "${name}" does not say what is inside; name what it is about.`);
}

function lengthProblems({ path, text }: SourceFile): string[] {
  const lines = text.trimEnd().split('\n').length;
  if (lines <= MAX_LINES || DATA_TABLES.test(path)) return [];
  return [`${path}: ${lines} lines, at most ${MAX_LINES}; split it by what it is about.`];
}
