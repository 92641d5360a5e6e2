import bunny from 'bunny';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { createStlReader, readStl, type StlResult } from '../../src/casting/stl';
import type { Triangle } from '../../src/casting/stl-problems';
import { asciiStl, binaryStl, box, bytesOf } from './solids';

const cube = box([10, 20, 30]);
const rabbit = bunny.cells.map((cell) => cell.flatMap((index) => bunny.positions[index]!) as unknown as Triangle);

function volumeOf(result: StlResult): number {
  if (!result.ok) throw new Error(result.problem.message);
  return result.measure.volumeMm3 ?? NaN;
}

function problemOf(result: StlResult) {
  if (result.ok) throw new Error('The file was read, although it should not have been.');
  return result.problem;
}

function inChunks(bytes: Uint8Array, size: number): StlResult {
  const reader = createStlReader({ size: bytes.length });
  for (let at = 0; at < bytes.length; at += size) reader.push(bytes.subarray(at, at + size));
  return reader.finish();
}

describe('whole files', () => {
  // Bunny values: npm bunny 1.0.1, measured by three programs that agree to 1e-5 (see measure.test.ts).
  test('binary and ASCII files of one solid measure the same', () => {
    const [binary, ascii] = [readStl(binaryStl(rabbit)), readStl(bytesOf(asciiStl(rabbit)))];
    expect(binary).toMatchObject({ ok: true, format: 'binary', measure: { closed: true, triangles: 3674 } });
    expect(ascii).toMatchObject({ ok: true, format: 'ascii', measure: { closed: true, triangles: 3674 } });
    expect(volumeOf(binary) / 194.288372).toBeCloseTo(1, 5);
    expect(volumeOf(ascii) / 194.288372).toBeCloseTo(1, 5);
  });

  test('a binary file whose header begins with "solid" is still binary', () => {
    for (const header of ['solid sword', 'solid '.padEnd(80, 'x')]) {
      expect(readStl(binaryStl(cube, { header }))).toMatchObject({
        ok: true,
        format: 'binary',
        measure: { closed: true },
      });
    }
  });

  test('so it is when the length of the file is not known', () => {
    const reader = createStlReader();
    reader.push(binaryStl(cube, { header: 'solid exported by a program' }));
    expect(reader.finish()).toMatchObject({ ok: true, format: 'binary' });
  });

  test('line ends of every system, capitals, exponents and two solids in one file are read', () => {
    for (const newline of ['\n', '\r\n', '\r'])
      expect(volumeOf(readStl(bytesOf(asciiStl(cube, newline))))).toBeCloseTo(6000, 9);
    const loud = asciiStl(cube).toUpperCase().replaceAll(' 10 ', ' +1.0E1 ');
    expect(volumeOf(readStl(bytesOf(loud)))).toBeCloseTo(6000, 9);
    const two = readStl(bytesOf(asciiStl(cube) + asciiStl(box([1, 1, 1], [50, 0, 0]))));
    expect(volumeOf(two)).toBeCloseTo(6001, 9);
  });

  test('a reader hands every triangle on', () => {
    const seen: Triangle[] = [];
    readStl(binaryStl(cube), { sink: (triangle) => seen.push(triangle) });
    expect(seen).toEqual(cube);
  });
});

describe('files in pieces', () => {
  test('any size of chunk gives the same answer', () => {
    const files = [binaryStl(cube), bytesOf(asciiStl(cube)), bytesOf(asciiStl(cube, '\r\n'))];
    fc.assert(
      fc.property(fc.constantFrom(...files), fc.integer({ min: 1, max: 700 }), (bytes, size) => {
        expect(inChunks(bytes, size)).toEqual(readStl(bytes));
      }),
    );
  });

  test('any cut is an error that says the file was cut off, never a measure', () => {
    const file = binaryStl(cube);
    fc.assert(
      fc.property(fc.integer({ min: 85, max: file.length - 1 }), (length) => {
        const problem = problemOf(readStl(file.subarray(0, length)));
        expect(problem.code).toBe('truncated');
        expect(problem.message).toContain('12 triangles');
      }),
    );
  });
});

describe('files that cannot be read', () => {
  test('an ASCII file cut in the middle names the line', () => {
    const text = asciiStl(cube);
    const problem = problemOf(readStl(bytesOf(text.slice(0, text.indexOf('endloop') + 7))));
    expect(problem).toEqual({ code: 'truncated', message: expect.stringContaining('line 7') });
  });

  test('a cut in the middle of a number is a cut too', () => {
    const text = asciiStl(cube);
    for (const keep of [5, 9, 12]) {
      expect(problemOf(readStl(bytesOf(text.slice(0, text.lastIndexOf('vertex') + keep)))).code).toBe('truncated');
    }
  });

  test('a decimal comma names the line and what stands there', () => {
    const problem = problemOf(readStl(bytesOf(asciiStl(cube).replace('vertex 0 0 0', 'vertex 0,5 0 0'))));
    expect(problem).toEqual({
      code: 'bad-number',
      message: 'Line 4: a vertex needs three numbers, but it reads "vertex 0,5 0 0".',
    });
  });

  test('a vertex that is not a number is read, counted and takes the volume away', () => {
    const ascii = readStl(bytesOf(asciiStl(cube).replace('vertex 0 0 0', 'vertex nan 0 0')));
    expect(ascii).toMatchObject({ ok: true, measure: { notFinite: 1, volumeMm3: null } });
    const [first, ...rest] = cube;
    const binary = readStl(binaryStl([[Infinity, ...first!.slice(1)] as unknown as Triangle, ...rest]));
    expect(binary).toMatchObject({ ok: true, measure: { notFinite: 1, volumeMm3: null } });
  });

  test('a facet with four corners asks for triangles', () => {
    const text = asciiStl(cube).replace('      vertex 0 0 0\n', '      vertex 0 0 0\n      vertex 1 0 0\n');
    expect(problemOf(readStl(bytesOf(text)))).toEqual({ code: 'bad-line', message: expect.stringContaining('4') });
  });

  test('bytes after the last triangle are refused', () => {
    const file = binaryStl(cube, { count: 11 });
    expect(problemOf(readStl(file))).toEqual({ code: 'extra-bytes', message: expect.stringContaining('50 bytes') });
  });

  test('empty, short, text of another kind and an image are told apart', () => {
    expect(problemOf(readStl(new Uint8Array())).code).toBe('empty');
    expect(problemOf(readStl(new Uint8Array(40))).code).toBe('not-stl');
    expect(problemOf(readStl(bytesOf('v 0 0 0\nf 1 2 3\n'.repeat(50)))).code).toBe('not-stl');
    const image = new Uint8Array(3000).map((_, i) => (i * 37 + 11) % 251);
    expect(problemOf(readStl(image)).code).toBe('not-stl');
  });

  test('more triangles than the limit are refused at the header, before any is read', () => {
    const problem = problemOf(readStl(binaryStl(cube), { mostTriangles: 10 }));
    expect(problem).toEqual({ code: 'too-many', message: expect.stringContaining('up to 10') });
    expect(problemOf(readStl(bytesOf(asciiStl(cube)), { mostTriangles: 10 })).code).toBe('too-many');
  });

  test('a line without end does not grow in memory', () => {
    const reader = createStlReader();
    reader.push(bytesOf('solid x\n'));
    for (let i = 0; i < 40; i++) reader.push(bytesOf('a'.repeat(1000)));
    expect(problemOf(reader.finish()).code).toBe('long-line');
  });

  test('random bytes never throw', () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 400 }), (bytes) => void readStl(bytes)));
  });
});
