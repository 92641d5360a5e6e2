import { enter } from './enter.mjs';

await enter('check.ts', process.argv.slice(2), { settings: false });
