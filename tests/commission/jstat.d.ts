declare module 'jstat' {
  export const jStat: {
    beta: { mean(a: number, b: number): number };
    betaln(a: number, b: number): number;
    combination(n: number, k: number): number;
    gammaln(x: number): number;
    ibeta(x: number, a: number, b: number): number;
  };
}
