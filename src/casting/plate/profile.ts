import type { Body, Station } from '../drawing';

/** Half-widths and half-thicknesses (mm) at one place of a body, and the two sections blended there. */
export type Profile = {
  left: number;
  right: number;
  front: number;
  back: number;
  section: string;
  next: string;
  blend: number;
};

type Ends = Body['ends'];
type Channel = (at: number) => number;

/** Slopes of a monotone cubic through the points (Fritsch and Carlson 1980: no overshoot between stations). */
function slopes(x: number[], y: number[]): number[] {
  const n = x.length;
  const secant = x.slice(1).map((xi, i) => (y[i + 1]! - y[i]!) / (xi - x[i]!));
  return x.map((_, i) => {
    if (i === 0) return secant[0]!;
    if (i === n - 1) return secant[n - 2]!;
    const before = secant[i - 1]!;
    const after = secant[i]!;
    if (before * after <= 0) return 0;
    const h0 = x[i]! - x[i - 1]!;
    const h1 = x[i + 1]! - x[i]!;
    const w0 = 2 * h1 + h0;
    const w1 = h1 + 2 * h0;
    return (w0 + w1) / (w0 / before + w1 / after);
  });
}

function hermite(x: number[], y: number[]): Channel {
  const m = slopes(x, y);
  return (at) => {
    let i = 0;
    while (i < x.length - 2 && at > x[i + 1]!) i += 1;
    const h = x[i + 1]! - x[i]!;
    const t = Math.min(1, Math.max(0, (at - x[i]!) / h));
    const t2 = t * t;
    const t3 = t2 * t;
    return (
      (2 * t3 - 3 * t2 + 1) * y[i]! +
      (t3 - 2 * t2 + t) * h * m[i]! +
      (-2 * t3 + 3 * t2) * y[i + 1]! +
      (t3 - t2) * h * m[i + 1]!
    );
  };
}

/** One measure along the stations: smooth between corners, broken at them. */
function channel(stations: Station[], read: (s: Station) => number): Channel {
  const runs: { from: number; to: number; value: Channel }[] = [];
  let start = 0;
  stations.forEach((station, i) => {
    if (i === 0 || (i < stations.length - 1 && !station.corner)) return;
    const run = stations.slice(start, i + 1);
    const x = run.map((s) => s.at);
    runs.push({ from: x[0]!, to: station.at, value: hermite(x, run.map(read)) });
    start = i;
  });
  return (at) => (runs.find((run) => at <= run.to) ?? runs[runs.length - 1]!).value(at);
}

/** Share (0 to 1) left of the full size near a domed end: a quarter ellipse over the last `cap` mm. */
function dome(at: number, from: number, to: number, ends: Ends): number {
  const quarter = (distance: number, cap: number) =>
    distance >= cap ? 1 : Math.sqrt(Math.max(0, 1 - ((cap - distance) / cap) ** 2));
  const start = ends?.start?.cap ?? 0;
  const end = ends?.end?.cap ?? 0;
  return (start > 0 ? quarter(at - from, start) : 1) * (end > 0 ? quarter(to - at, end) : 1);
}

/** First and last `at` of the stations, mm. */
export function reach(stations: Station[]): [number, number] {
  return [stations[0]!.at, stations[stations.length - 1]!.at];
}

/**
 * The body's measures as a function of the distance along it (mm in, mm out; outside the stations the ends are held).
 * Widths and thicknesses run as monotone cubics between stations, so a drawn outline never swells past what is given.
 */
export function profileAlong(stations: Station[], ends: Ends, section: string | undefined): (at: number) => Profile {
  const left = channel(stations, (s) => s.left ?? s.width! / 2);
  const right = channel(stations, (s) => s.right ?? s.width! / 2);
  const front = channel(stations, (s) => s.front ?? s.thickness! / 2);
  const back = channel(stations, (s) => s.back ?? s.thickness! / 2);
  const names: string[] = [];
  for (const s of stations) names.push(s.section ?? names[names.length - 1] ?? section ?? '');
  const [from, to] = reach(stations);
  return (where) => {
    const at = Math.min(to, Math.max(from, where));
    const k = dome(at, from, to, ends);
    let i = 0;
    while (i < stations.length - 2 && at > stations[i + 1]!.at) i += 1;
    const span = stations[i + 1]!.at - stations[i]!.at;
    return {
      left: left(at) * k,
      right: right(at) * k,
      front: front(at) * k,
      back: back(at) * k,
      section: names[i]!,
      next: names[i + 1]!,
      blend: (at - stations[i]!.at) / span,
    };
  };
}

/** Places to sample: every station, `n` even steps, and closer ones inside a dome. Ascending, mm. */
export function samplePlaces(stations: Station[], ends: Ends, n: number): number[] {
  const [from, to] = reach(stations);
  const places = new Set<number>(stations.map((s) => s.at));
  for (let i = 0; i <= n; i += 1) places.add(from + ((to - from) * i) / n);
  const dense = 14;
  for (let i = 1; i < dense; i += 1) {
    const k = 1 - Math.cos((Math.PI / 2) * (i / dense));
    if (ends?.start?.cap) places.add(from + ends.start.cap * k);
    if (ends?.end?.cap) places.add(to - ends.end.cap * k);
  }
  return [...places].filter((at) => at >= from && at <= to).sort((a, b) => a - b);
}
