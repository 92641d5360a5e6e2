import type { PieceStage } from '../../../commission/making/making';

interface StageWords {
  heading: string;
  /** What was done, for a reader who has never seen a foundry. */
  done: string;
  /** The stage as something still ahead. */
  ahead: string;
}

/** Each stage as a customer's letter tells it. */
export const STAGE_WORDS: Record<PieceStage, StageWords> = {
  waiting: {
    heading: 'Still in the queue',
    done: 'Your piece waits for its turn at the bench; the dates have not moved.',
    ahead: 'your piece comes to the bench',
  },
  pattern: {
    heading: 'The pattern is ready',
    done: 'The pattern is done: the shape from which the mould is made.',
    ahead: 'we make the pattern, the shape from which the mould is made',
  },
  mould: {
    heading: 'The mould is ready',
    done: 'The mould is made. It stays warm and dry until pour day.',
    ahead: 'we make the mould and dry it',
  },
  poured: {
    heading: 'The metal is poured',
    done: 'The metal went into the mould. Whether the casting is sound shows when the mould is broken open.',
    ahead: 'we melt the metal and pour',
  },
  sound: {
    heading: 'A sound casting',
    done: 'The mould is broken open, the casting weighed and looked over: it is sound.',
    ahead: 'we break open the mould and look whether the casting is sound',
  },
  fettled: {
    heading: 'Fettled',
    done: 'The channels the metal came in by are cut off, and the casting is cleaned and dressed.',
    ahead: 'we fettle it: cut off the channels the metal came in by, and dress the casting',
  },
  hardened: {
    heading: 'The edges are hardened',
    done: 'The edges are hammered cold, which makes them harder.',
    ahead: 'we hammer the edges cold to harden them',
  },
  finished: {
    heading: 'Filed and finished',
    done: 'The surface is filed, rubbed down and finished as agreed.',
    ahead: 'we file and finish the surface',
  },
  patinated: {
    heading: 'The colour is on',
    done: 'The patina is on and sealed with wax.',
    ahead: 'we give it its patina',
  },
  hafted: {
    heading: 'Hafted',
    done: 'The piece sits on its haft or in its grip.',
    ahead: 'we fit the haft or grip',
  },
  inspected: {
    heading: 'Inspected',
    done: 'The piece is weighed, measured and checked against what was promised.',
    ahead: 'we inspect it: weigh, measure and check it against what was promised',
  },
  packed: {
    heading: 'Packed',
    done: 'The piece is packed and waits for the carrier.',
    ahead: 'we pack it for the carrier',
  },
};
