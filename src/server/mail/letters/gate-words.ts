/** What each look-and-approve gate is about: what an approval fixes and what may still change after it. */
export const GATE_WORDS = {
  A: {
    subject: 'pattern',
    open: 'The pattern of your piece is ready for you to look at. The mould is made from it.',
    fixes: ['The shape and the size', 'The place of the mark', 'The surface as it will be cast'],
    canChange: ['The finish and its colour', 'The edge', 'The haft, where there is one'],
    after: 'we make the mould',
  },
  B: {
    subject: 'colour sample',
    open: 'The colour sample for your piece is ready, photographed in daylight beside a grey card.',
    fixes: ['The colour, within the range the sample shows', 'The sheen of the surface'],
    canChange: ['The haft, where there is one', 'Where and when it is sent'],
    after: 'we colour the piece',
  },
  C: {
    subject: 'finished piece',
    open: 'Your piece is finished. Look at it once more before it is packed.',
    fixes: ['The piece as the photos show it'],
    canChange: ['Where and when it is sent'],
    after: 'we pack the piece',
  },
} as const;
