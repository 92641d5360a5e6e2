import type { Body, Drawing, DrawnLine, End, Station } from './drawing';

/** How much longer, wider and thicker a piece is drawn than its description says; 1 is as described. */
export interface DrawnScale {
  length: number;
  width: number;
  thickness: number;
}

const times = (value: number | undefined, factor: number) => (value === undefined ? undefined : value * factor);

function scaleStation(station: Station, along: number, { width, thickness }: DrawnScale): Station {
  return {
    ...station,
    at: station.at * along,
    width: times(station.width, width),
    left: times(station.left, width),
    right: times(station.right, width),
    thickness: times(station.thickness, thickness),
    front: times(station.front, thickness),
    back: times(station.back, thickness),
  };
}

function scaleEnd(end: End | undefined, along: number, { width }: DrawnScale): End | undefined {
  if (!end) return undefined;
  const { notch } = end;
  return {
    cap: times(end.cap, along),
    bulge: times(end.bulge, along),
    notch: notch && { depth: notch.depth * along, width: notch.width * width },
  };
}

type Part = Pick<Body, 'stations' | 'ends'>;

function scalePart<P extends Part>(part: P, along: number, scale: DrawnScale): P {
  const ends = part.ends && {
    start: scaleEnd(part.ends.start, along, scale),
    end: scaleEnd(part.ends.end, along, scale),
  };
  return { ...part, stations: part.stations.map((station) => scaleStation(station, along, scale)), ends };
}

const reach = (points: readonly (readonly [number, number])[]) =>
  points.slice(1).reduce((sum, point, i) => sum + Math.hypot(point[0] - points[i]![0], point[1] - points[i]![1]), 0);

function scaleBody(body: Body, scale: DrawnScale): Body {
  const { spine } = body;
  const second = spine?.plane === 'side' ? scale.thickness : scale.width;
  const points = spine?.points.map(([along, off]): [number, number] => [along * scale.length, off * second]);
  // Stations on a spine are told by the distance along it, which grows as the spine does.
  const along = spine && points ? reach(points) / reach(spine.points) : scale.length;
  return {
    ...scalePart(body, along, scale),
    spine: spine && points && { ...spine, points },
    hollow: body.hollow && scalePart(body.hollow, along, scale),
  };
}

function scaleLine(line: DrawnLine, scale: DrawnScale): DrawnLine {
  if ('follow' in line) return { ...line, follow: line.follow.map(([at, share]) => [at * scale.length, share]) };
  const second = line.view === 'side' ? scale.thickness : scale.width;
  return { ...line, points: line.points.map(([along, off]) => [along * scale.length, off * second]) };
}

/**
 * A description drawn at another size: the outline keeps its proportions in each direction, rivet holes keep their own
 * size, knops grow with the girth. The scale bar stays, so the plate shows the change.
 */
export function scaleDrawing(drawing: Drawing, scale: DrawnScale): Drawing {
  if (scale.length === 1 && scale.width === 1 && scale.thickness === 1) return drawing;
  const girth = Math.sqrt(scale.width * scale.thickness);
  return {
    ...drawing,
    bodies: drawing.bodies.map((body) => scaleBody(body, scale)),
    holes: drawing.holes.map((hole) => ({ ...hole, at: hole.at * scale.length, across: hole.across * scale.width })),
    knops: drawing.knops.map((knop) => ({
      ...knop,
      at: knop.at * scale.length,
      foot: knop.foot * girth,
      tip: knop.tip * girth,
      along: knop.along * scale.length,
      spread: knop.spread * girth,
    })),
    lines: drawing.lines.map((line) => scaleLine(line, scale)),
    cuts: drawing.cuts.map((cut) => ({ ...cut, at: cut.at * scale.length })),
  };
}
