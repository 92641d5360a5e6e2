import { enter } from './enter.mjs';

const args = process.argv.slice(2);
const bench = args.includes('--bench');
await enter(
  bench ? 'bench.ts' : 'test.ts',
  args.filter((arg) => arg !== '--bench'),
  { settings: false },
);
