import { card, estimated, forms } from '../commission/card';

/** The page reckons anew at each keystroke; more than one picture of a 60 Hz screen would be felt. */
const PROMISE = 1000 / 60;

const times: number[] = [];
for (let round = 0; round < 40; round += 1) {
  for (const form of forms) {
    const begun = performance.now();
    estimated({ what: 'form', form: form.slug, pieces: String(1 + (round % card.rates.finishes.length)) });
    times.push(performance.now() - begun);
  }
}
const steady = times.slice(forms.length * 5).sort((a, b) => a - b);
const [median, p95] = [0.5, 0.95].map((share) => steady[Math.floor(steady.length * share)]!);
console.log(`estimate, with its levers: median ${median!.toFixed(2)} ms, 95 % within ${p95!.toFixed(2)} ms`);
console.log(`promised within ${PROMISE.toFixed(1)} ms: ${p95! <= PROMISE ? 'kept' : 'BROKEN'}`);
process.exitCode = p95! <= PROMISE ? 0 : 1;
