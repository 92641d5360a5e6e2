import { z } from 'zod';
import { textLines } from './input-fields';

const LINES = 'Write the address as you would on a parcel: at least two lines, at most seven, without the country.';
const COUNTRY = 'Choose the country the parcel goes to.';

/** Where a parcel goes. `lines` as on a label, without the country (ISO 3166-1 alpha-2). */
export const parcelAddressSchema = z.object({
  lines: textLines(7, 80, LINES).refine((lines) => lines.length >= 2, LINES),
  country: z
    .string(COUNTRY)
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{2}$/, COUNTRY),
  phone: z.string('Carriers ask for a telephone number.').trim().min(5, 'Carriers ask for a telephone number.').max(40),
});
export type ParcelAddress = z.output<typeof parcelAddressSchema>;
