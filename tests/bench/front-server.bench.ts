import { fork } from 'node:child_process';
import { once } from 'node:events';
import { freeBasePort } from '../../src/launch/ports';
import { answersPerSecond } from './load';

/** A built page must come no slower than half as fast as from a server that does nothing but send it. */
const PROMISE = 0.5;
const ROUNDS = 7;

const port = await freeBasePort();
const servers = fork('tests/bench/two-servers.ts', {
  env: { ...process.env, PORT: `${port}` },
  execArgv: ['--import', 'tsx'],
});
await once(servers, 'message');

interface Measured {
  /** Answers per second as somebody at the other end sees them. */
  speed: number;
  /** Microseconds of processor time the server spends on one answer; other programs do not change it. */
  cost: number;
}

async function measure(which: 0 | 1): Promise<Measured> {
  const before = await processorTime();
  const begun = performance.now();
  const speed = await answersPerSecond(port + which, '/', 16, 1_500);
  const answers = (speed * (performance.now() - begun)) / 1000;
  return { speed, cost: ((await processorTime()) - before) / answers };
}

async function processorTime(): Promise<number> {
  servers.send('processor time?');
  const [microseconds] = (await once(servers, 'message')) as [number];
  return microseconds;
}

await measure(0);
await measure(1);
// Taken in turns, so that whatever else the machine does falls on both.
const rounds: { front: Measured; bare: Measured }[] = [];
for (let round = 0; round < ROUNDS; round += 1) rounds.push({ front: await measure(0), bare: await measure(1) });
servers.kill();

const median = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!;
const of = (value: (round: (typeof rounds)[number]) => number) => median(rounds.map(value));
console.log(
  `front server: ${of(({ front }) => front.speed).toFixed(0)} answers/s, ${of(({ front }) => front.cost).toFixed(1)} us each; ` +
    `bare node:http: ${of(({ bare }) => bare.speed).toFixed(0)} answers/s, ${of(({ bare }) => bare.cost).toFixed(1)} us each`,
);
const bySpeed = of(({ front, bare }) => front.speed / bare.speed);
const byCost = of(({ front, bare }) => bare.cost / front.cost);
const kept = Math.min(bySpeed, byCost) >= PROMISE;
console.log(`ratio by speed ${bySpeed.toFixed(2)}, by processor time ${byCost.toFixed(2)}`);
console.log(`promised at least ${PROMISE} by both: ${kept ? 'kept' : 'BROKEN'}`);
process.exitCode = kept ? 0 : 1;
