import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';

const { scripts } = JSON.parse(readFileSync('package.json', 'utf8')) as { scripts: Record<string, string> };

// npm runs a script in a shell and passes SIGTERM to that shell alone; `exec` puts our program in its place
// (seen with npm 11.19.1 and Debian's dash: without it the launcher lived on).
it.each(['start', 'dev', 'test', 'check'])('npm %s hands its signals to our own program', (name) => {
  expect(scripts[name]).toMatch(/^exec node /);
});
