import { enter } from './enter.mjs';

const args = process.argv.slice(2);
await enter(args.includes('--dev') ? 'dev.ts' : 'start.ts', args);
