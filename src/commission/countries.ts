const NAMES = new Intl.DisplayNames(['en-GB'], { type: 'region', fallback: 'code' });

/** A country's name in English from its two-letter code (ISO 3166-1 alpha-2); the code itself when it is unknown. */
export function countryName(code: string): string {
  return /^[A-Z]{2}$/.test(code) ? (NAMES.of(code) ?? code) : code;
}
