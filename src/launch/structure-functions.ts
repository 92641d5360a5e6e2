import ts from 'typescript';
import type { SourceFile } from './structure';

const MAX_FUNCTION = 60;
const MAX_COMPONENT = 100;

/** Functions longer than a reader can hold in mind; a component may be longer, for its markup. Tests are free. */
export function functionProblems({ path, text }: SourceFile): string[] {
  if (!/\.(ts|tsx|mjs)$/.test(path) || path.startsWith('tests/')) return [];
  const source = ts.createSourceFile(path, text, ts.ScriptTarget.Latest, true);
  const limit = path.endsWith('.tsx') ? MAX_COMPONENT : MAX_FUNCTION;
  const problems: string[] = [];
  const visit = (node: ts.Node): void => {
    if (ts.isFunctionLike(node) && 'body' in node && node.body) {
      const first = source.getLineAndCharacterOfPosition(node.getStart()).line;
      const lines = source.getLineAndCharacterOfPosition(node.end).line - first + 1;
      const name = node.name?.getText() ?? 'a function';
      if (lines > limit) problems.push(`${path}:${first + 1}: ${name} has ${lines} lines, at most ${limit}.`);
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return problems;
}
