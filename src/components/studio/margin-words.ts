/** A share as per cent with one decimal: "7.9 %". */
export const percentOf = (share: number): string => `${(share * 100).toFixed(1).replace('-', '−')} %`;

/** True when two shares read alike. */
export const readAlike = (one: number, other: number): boolean => percentOf(one) === percentOf(other);
