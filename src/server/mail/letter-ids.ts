/** Letters the product can send, by their number in the mail catalogue. */
export const LETTER_IDS = [
  'M0',
  'M1',
  'M2',
  'M3',
  'M5',
  'M6',
  'M7',
  'M8',
  'M11',
  'M12',
  'M13',
  'M14',
  'M15',
  'M16',
  'M19',
  'M20',
  'M23',
  'M24',
  'M26',
] as const;
export type LetterId = (typeof LETTER_IDS)[number];
