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

/**
 * Reads an ASCII STL in pieces of any length: solid, facet normal, outer loop, three vertex lines, endloop, endfacet,
 * endsolid; several solids in one file are one after the other. Holds one unfinished line. Stops at the first problem.
 */
export function createAsciiReader(sink: TriangleSink) {
  const decoder = new TextDecoder('utf-8');
  let rest = '';
  let lineNumber = 0;
  let corners: number[] | null = null;
  let open = false;
  let ended = false;
  let problem: StlProblem | null = null;

  const fail = (code: StlProblem['code'], what: string) => {
    problem ??= { code, message: `Line ${lineNumber}: ${what}` };
  };

  function vertex(words: string[]): void {
    if (!corners) return fail('bad-line', 'a vertex stands outside a loop. Save the file again as STL.');
    const numbers = words.slice(1).map(parseNumber);
    const [x, y, z] = numbers;
    if (words.length !== 4 || x === undefined || y === undefined || z === undefined) {
      return fail(
        'bad-number',
        `a vertex needs three numbers, but it reads "${words.slice(0, 5).join(' ').slice(0, 60)}".`,
      );
    }
    corners.push(x, y, z);
  }

  function endLoop(): void {
    if (corners?.length !== 9) {
      return fail(
        'bad-line',
        `a facet needs three corners, this one has ${Math.floor((corners?.length ?? 0) / 3)}. Save it as triangles.`,
      );
    }
    sink(corners as unknown as Triangle);
    corners = null;
  }

  const KEYWORDS: Record<string, (words: string[]) => void> = {
    solid: () => {
      open = true;
      ended = false;
    },
    facet: () => undefined,
    outer: () => {
      if (corners) fail('bad-line', 'a loop starts inside another.');
      corners = [];
    },
    vertex,
    endloop: endLoop,
    endfacet: () => undefined,
    endsolid: () => {
      open = false;
      ended = true;
    },
  };

  function line(text: string): void {
    lineNumber += 1;
    const words = text.trim().split(/\s+/);
    const keyword = (words[0] ?? '').toLowerCase();
    if (keyword === '' || problem) return;
    const handle = Object.hasOwn(KEYWORDS, keyword) ? KEYWORDS[keyword] : undefined;
    if (!handle) return fail('bad-line', `"${keyword.slice(0, 30)}" is no word of an STL file.`);
    handle(words);
  }

  function lines(text: string): void {
    const parts = (rest + text).split(/\r\n|\n|\r(?!$)/);
    rest = parts.pop() ?? '';
    for (const part of parts) line(part);
    if (rest.length > LONGEST_LINE) {
      lineNumber += 1;
      fail('long-line', `it is longer than ${LONGEST_LINE} characters, which no STL line is.`);
      rest = '';
    }
  }

  return {
    push(chunk: Uint8Array): void {
      if (!problem) lines(decoder.decode(chunk, { stream: true }));
    },
    /** A last line without its end was cut off, so what is wrong with it says nothing else. */
    finish(): StlProblem | null {
      if (!problem) lines(decoder.decode());
      if (problem) return problem;
      line(rest);
      if (!problem && ended && !open && !corners) return null;
      return {
        code: 'truncated',
        message: `The file ends at line ${lineNumber} without "endsolid". It was cut off: send it again.`,
      };
    },
  };
}
