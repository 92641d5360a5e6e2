import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { cleanEnvironment } from './clean-environment';
import { createSteps } from './steps';
import { structureProblems } from './structure';

interface Check {
  title: string;
  /** Arguments of Node.js: the tool's own file and its options. */
  command: string[];
}

const CHECKS: Check[] = [
  {
    title: 'Types (astro check)',
    command: ['node_modules/astro/astro.js', 'check', '--minimumFailingSeverity', 'warning'],
  },
  { title: 'Lint (eslint)', command: ['node_modules/eslint/bin/eslint.js', '.', '--max-warnings', '0'] },
  {
    title: 'Format (prettier)',
    command: ['node_modules/prettier/bin/prettier.cjs', '--check', '--log-level', 'warn', '.'],
  },
];

/** `npm run check`: types, lint, format and structure; every check runs, and any that fails makes the whole fail. */
export async function run(): Promise<number> {
  const steps = createSteps();
  process.env = cleanEnvironment();
  const failures: string[] = [];
  for (const { title, command } of CHECKS) {
    const output = await steps.run(title, (progress) => runTool(command, progress));
    if (output !== undefined) failures.push(`${title}\n${output}`);
  }
  const problems = await steps.run('Structure', (progress) => {
    const found = structureProblems();
    if (found.length > 0) progress('FAILED');
    return found;
  });
  if (problems.length > 0) failures.push(`Structure\n${problems.map((problem) => `  ${problem}`).join('\n')}`);
  steps.say(failures.length > 0 ? `\n${failures.join('\n\n')}\n` : 'All checks passed.');
  return failures.length > 0 ? 1 : 0;
}

/** Runs one tool; gives its output when it failed, and nothing when it passed. */
async function runTool(command: string[], progress: (words: string) => void): Promise<string | undefined> {
  const tool = spawn(process.execPath, command, { stdio: ['ignore', 'pipe', 'pipe'] });
  const output: Buffer[] = [];
  for (const stream of [tool.stdout, tool.stderr]) stream.on('data', (chunk: Buffer) => output.push(chunk));
  const [code] = (await once(tool, 'close')) as [number | null];
  if (code === 0) return undefined;
  progress('FAILED');
  return Buffer.concat(output).toString();
}
