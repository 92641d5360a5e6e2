import {
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  truncateSync,
  writeSync,
} from 'node:fs';
import { dirname } from 'node:path';

/** One change: table, id, new value; null takes the row away. */
export type Change = [table: string, id: string, value: unknown];

/**
 * The state file: one line of JSON for each commit, appended before the answer goes out, so that a process killed at
 * any moment loses nothing that was answered. A last line cut short by a crash was never answered and is dropped.
 */
export class Journal {
  readonly #path: string;
  #file: number;

  private constructor(path: string) {
    this.#path = path;
    this.#file = openSync(path, 'a');
  }

  /**
   * Opens the file, making it and its folder when missing, and hands every kept change to `replay` in order.
   * @throws Error naming the file and line when a line before the last cannot be read.
   */
  static open(path: string, replay: (change: Change) => void): { journal: Journal; commits: number } {
    mkdirSync(dirname(path), { recursive: true });
    const commits = existsSync(path) ? replayFile(path, replay) : 0;
    return { journal: new Journal(path), commits };
  }

  /** Appends one commit; when this returns, the operating system has it. */
  append(changes: Change[]): void {
    writeSync(this.#file, `${JSON.stringify(changes)}\n`);
  }

  /** Replaces the file by one that holds only `changes`: written beside it, then renamed over it. */
  rewrite(changes: Change[]): void {
    const beside = `${this.#path}.new`;
    const file = openSync(beside, 'w');
    for (const change of changes) writeSync(file, `${JSON.stringify([change])}\n`);
    fsyncSync(file);
    closeSync(file);
    closeSync(this.#file);
    renameSync(beside, this.#path);
    this.#file = openSync(this.#path, 'a');
  }

  /** Closes the file. */
  close(): void {
    fsyncSync(this.#file);
    closeSync(this.#file);
  }
}

function replayFile(path: string, replay: (change: Change) => void): number {
  const text = readFileSync(path, 'utf8');
  const complete = text.slice(0, text.lastIndexOf('\n') + 1);
  if (complete.length < text.length) truncateSync(path, Buffer.byteLength(complete));
  const lines = complete.split('\n').slice(0, -1);
  lines.forEach((line, index) => {
    for (const change of readLine(path, line, index + 1)) replay(change);
  });
  return lines.length;
}

function readLine(path: string, line: string, number: number): Change[] {
  try {
    return JSON.parse(line) as Change[];
  } catch (error) {
    throw new Error(`Line ${number} of ${path} cannot be read. Move the file away to start empty.`, { cause: error });
  }
}
