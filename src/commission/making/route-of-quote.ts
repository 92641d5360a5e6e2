import type { CostLine } from '../pricing/cost-lines';
import { routeFor, type PieceStage, type RouteOptions } from './making';

/**
 * What a quote's cost lines say about the route of its pieces: a stage is on the route when the quote
 * has time for it. Gate A (and so the pattern stage) is there when a line before the gate pays for it.
 */
export function routeOptionsOf(
  lines: readonly Pick<CostLine, 'id' | 'group' | 'minutes' | 'onPieces'>[],
): RouteOptions {
  const timed = (group: CostLine['group'], start: string) =>
    lines.some((line) => line.group === group && line.id.startsWith(start) && line.minutes > 0);
  return {
    pattern: timed('before-gate', 'gate-a'),
    harden: timed('hand', 'edge'),
    patinate: timed('hand', 'patina'),
    haft: timed('hand', 'haft'),
  };
}

/** The route of piece `number` (from 1): a line that applies to the first few pieces only is left out of the others. */
export function routeOfPiece(
  lines: readonly Pick<CostLine, 'id' | 'group' | 'minutes' | 'onPieces'>[],
  number: number,
): PieceStage[] {
  return routeFor(routeOptionsOf(lines.filter((line) => line.onPieces === null || line.onPieces >= number)));
}
