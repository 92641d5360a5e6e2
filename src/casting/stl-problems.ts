/** Why an STL file could not be read, with where in the file. A sentence for the sender, and a code that stays. */
export interface StlProblem {
  code: 'empty' | 'not-stl' | 'truncated' | 'extra-bytes' | 'bad-number' | 'bad-line' | 'too-many' | 'long-line';
  message: string;
}

/** One triangle as nine numbers: x, y, z of three corners in file order. */
export type Triangle = readonly [number, number, number, number, number, number, number, number, number];

/** What a reader hands every triangle to. */
export type TriangleSink = (triangle: Triangle) => void;
