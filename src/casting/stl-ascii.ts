import type { StlProblem, Triangle, TriangleSink } from './stl-problems';

/** No line of an ASCII STL is longer than this many characters, except by mistake or malice. */
const LONGEST_LINE = 4096;

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const NOT_A_NUMBER = /^[+-]?(nan(\(.*\))?|inf(inity)?|1\.#\w+)$/i;

/** NaN for the spellings of not-a-number that exporters write, undefined for anything that is no number at all. */
function parseNumber(word: string): number | undefined {
  if (NUMBER.test(word)) return Number(word);
  return NOT_A_NUMBER.test(word) ? NaN : undefined;
}

/** Makes lines of text that comes in pieces of any length; `line` gets each without its end. Holds one unfinished line. */
function createLines(line: (text: string) => void, tooLong: () => void) {
  const decoder = new TextDecoder('utf-8');
  let rest = '';
  function split(text: string): void {
    // A lone return at the very end may be the first half of a pair: it waits for the next piece.
    const parts = (rest + text).split(/\r\n|\n|\r(?!$)/);
    rest = parts.pop() ?? '';
    for (const part of parts) line(part);
    if (rest.length > LONGEST_LINE) {
      tooLong();
      rest = '';
    }
  }
  return {
    push: (chunk: Uint8Array) => split(decoder.decode(chunk, { stream: true })),
    /** The last line, which has no end. */
    finish(): string {
      split(decoder.decode());
      return rest;
    },
  };
}

/** Understands the lines of an ASCII STL one by one; `fail` gets what is wrong with a line. */
function createFacets(sink: TriangleSink, fail: (code: StlProblem['code'], what: string) => void) {
  let corners: number[] | null = null;
  let ended = false;

  function vertex(words: string[]): void {
    if (!corners) return fail('bad-line', 'a vertex stands outside a loop. Save the file again as STL.');
    const [x, y, z] = words.slice(1).map(parseNumber);
    if (words.length !== 4 || x === undefined || y === undefined || z === undefined) {
      const found = words.slice(0, 5).join(' ').slice(0, 60);
      return fail('bad-number', `a vertex needs three numbers, but it reads "${found}".`);
    }
    corners.push(x, y, z);
  }

  function endLoop(): void {
    const found = Math.floor((corners?.length ?? 0) / 3);
    if (corners?.length !== 9) {
      return fail('bad-line', `a facet needs three corners, this one has ${found}. Save it as triangles.`);
    }
    sink(corners as unknown as Triangle);
    corners = null;
  }

  const words: Record<string, (line: string[]) => void> = {
    solid: () => void (ended = false),
    facet: () => undefined,
    outer: () => (corners ? fail('bad-line', 'a loop starts inside another.') : void (corners = [])),
    vertex,
    endloop: endLoop,
    endfacet: () => undefined,
    endsolid: () => void (ended = true),
  };
  return {
    line(keyword: string, line: string[]): void {
      const understand = Object.hasOwn(words, keyword) ? words[keyword] : undefined;
      if (understand) understand(line);
      else fail('bad-line', `"${keyword.slice(0, 30)}" is no word of an STL file.`);
    },
    complete: () => ended && corners === null,
  };
}

/**
 * Reads an ASCII STL in pieces of any length: solid, facet normal, outer loop, three vertex lines, endloop, endfacet,
 * endsolid; several solids in one file follow one another. Stops at the first problem and names its line.
 */
export function createAsciiReader(sink: TriangleSink) {
  let lineNumber = 0;
  let problem: StlProblem | null = null;
  const fail = (code: StlProblem['code'], what: string) => {
    problem ??= { code, message: `Line ${lineNumber}: ${what}` };
  };
  const facets = createFacets(sink, fail);

  function line(text: string): void {
    lineNumber += 1;
    const words = text.trim().split(/\s+/);
    const keyword = (words[0] ?? '').toLowerCase();
    if (keyword !== '' && !problem) facets.line(keyword, words);
  }
  const lines = createLines(line, () => {
    lineNumber += 1;
    fail('long-line', `it is longer than ${LONGEST_LINE} characters, which no STL line is.`);
  });

  return {
    push(chunk: Uint8Array): void {
      if (!problem) lines.push(chunk);
    },
    /** A last line without its end was cut off, so what is wrong with it says nothing else. */
    finish(): StlProblem | null {
      const last = lines.finish();
      if (problem) return problem;
      line(last);
      if (!problem && facets.complete()) return null;
      const message = `The file ends at line ${lineNumber} without "endsolid". It was cut off: send it again.`;
      return { code: 'truncated', message };
    },
  };
}
