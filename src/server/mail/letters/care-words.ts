import type { LetterData } from '../letter-data';

type Delivered = Pick<LetterData['M26'], 'finish' | 'hafted' | 'bladed'>;

/** How to keep a piece of this finish. Common practice, no source. */
export function careFor({ finish, hafted, bladed }: Delivered): string[] {
  return [
    ...BY_FINISH[finish],
    'Keep it dry. Wipe off finger marks with a soft dry cloth: salt from the skin spots the metal.',
    'Never use metal polish with ammonia, vinegar or lemon, nor a dishwasher. Do not eat or drink from it.',
    ...(hafted ? ['Rub the wood with a little linseed oil once a year, and keep it away from radiators.'] : []),
    ...(bladed
      ? ['Treat it as a blade: keep it out of children’s reach and mind the law on carrying it where you live.']
      : []),
  ];
}

const BY_FINISH: Record<Delivered['finish'], string[]> = {
  bright: [
    'Bright bronze darkens by itself, golden to brown. To slow it, rub in a thin coat of clear paste wax twice a year.',
    'If you like it bright again, a little fine chalk paste and a cloth will do; rub along the piece.',
  ],
  patinated: [
    'The colour is a thin skin on the metal under wax. Do not polish it; renew the wax once a year with a soft brush.',
    'A pale green powder that comes back after wiping means damp and salt: write to us before you do anything.',
  ],
  'as-cast': [
    'The skin from the mould is left as it came. A thin coat of clear paste wax once a year is enough.',
    'Brush dust out with a soft brush; a cloth would catch on it.',
  ],
};
