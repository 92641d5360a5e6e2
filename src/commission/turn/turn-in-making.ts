import { withinSentence } from '../sentence';
import type { TurnFacts, WhoseTurn } from './turn-facts';

const GATE_WORDS: Record<string, string> = {
  A: 'the wax or pattern',
  B: 'the colour sample',
  C: 'the finished piece',
};

/** Whose turn it is while a commission is being made: an open gate first, then the work. */
export function turnInMaking(facts: TurnFacts): WhoseTurn {
  const { gate, pieces } = facts;
  if (gate) {
    const what = GATE_WORDS[gate.gate] ?? 'the work';
    return gate.state === 'open'
      ? {
          who: 'customer',
          sentence: `Photos of ${what} are waiting for you. Look at them and approve, or ask for changes; nothing goes on before.`,
          studioSentence: `Gate ${gate.gate} open`,
          since: gate.at,
        }
      : {
          who: 'studio',
          sentence: `You asked for changes to ${what}. We make them and show you new photos.`,
          studioSentence: `Gate ${gate.gate}, changes asked`,
          since: gate.at,
        };
  }
  return workTurn(facts, pieces);
}

function workTurn(facts: TurnFacts, pieces: TurnFacts['pieces']): WhoseTurn {
  const studio = (sentence: string, studioSentence: string): WhoseTurn => ({
    who: 'studio',
    sentence,
    studioSentence,
    since: pieces?.since ?? facts.since,
  });
  if (!pieces || pieces.total === 0)
    return studio('We are starting on your piece. You need do nothing.', 'Making, no piece laid out yet');
  const left = pieces.total - pieces.done;
  if (left === 0)
    return studio(
      pieces.total === 1
        ? 'Your piece is through the workshop. We look it over once more and tell you it is finished.'
        : 'All your pieces are through the workshop. We look them over once more and tell you they are finished.',
      'All work done, to be declared finished',
    );
  if (pieces.scrapped)
    return studio(
      'A casting failed and went back into the pot. We pour again at no charge; you need do nothing.',
      'Scrapped, pour again',
    );
  const next = withinSentence(pieces.nextWork ?? 'the work');
  const count = pieces.total === 1 ? '' : `, ${pieces.ahead} of ${pieces.total} pieces`;
  const them = pieces.total === 1 || pieces.ahead === pieces.total ? '' : ` for ${pieces.ahead} of them`;
  return studio(
    `We are working on your ${pieces.total === 1 ? 'piece' : `${pieces.total} pieces`}; next comes ${next}${them}. You need do nothing.`,
    `Next: ${next}${count}`,
  );
}
