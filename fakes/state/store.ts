import { Journal, type Change } from './journal';

/** Rows of one kind by id, in the order they were first put. Rows are never changed in place. */
export class Table<Row> {
  readonly #rows = new Map<string, Row>();
  readonly #name: string;
  readonly #record: (change: Change, before: Row | undefined) => void;

  constructor(name: string, record: (change: Change, before: unknown) => void) {
    this.#name = name;
    this.#record = record;
  }

  get(id: string): Row | undefined {
    return this.#rows.get(id);
  }

  /** All rows, oldest first. */
  all(): Row[] {
    return [...this.#rows.values()];
  }

  /** All rows, newest first, as both services list them. */
  newest(): Row[] {
    return this.all().reverse();
  }

  /** Adds or replaces a row and returns it. Only inside `Store.write`. */
  put(id: string, row: Row): Row {
    this.#record([this.#name, id, row], this.#rows.get(id));
    this.#rows.set(id, row);
    return row;
  }

  /** Takes a row away. Only inside `Store.write`. */
  remove(id: string): void {
    this.#record([this.#name, id, null], this.#rows.get(id));
    this.#rows.delete(id);
  }

  /** Sets a row without recording it: for reading the file back and for undoing a failed write. */
  restore(id: string, row: Row | null | undefined): void {
    if (row === null || row === undefined) this.#rows.delete(id);
    else this.#rows.set(id, row);
  }

  /** Every row as a change, for a fresh file. */
  snapshot(): Change[] {
    return [...this.#rows].map(([id, row]) => [this.#name, id, row]);
  }
}

type Undo = { table: string; id: string; before: unknown };

/**
 * Tables in memory with a journal on disk. `write` is all or nothing: its changes reach the file in one line before it
 * returns, or, when it throws, none of them stays.
 */
export class Store {
  readonly #tables = new Map<string, Table<unknown>>();
  readonly #kept = new Map<string, Change[]>();
  #journal: Journal | null = null;
  #changes: Change[] = [];
  #undo: Undo[] = [];
  #depth = 0;

  /** Without a path, nothing outlives the process. */
  constructor(path: string | null) {
    if (!path) return;
    const opened = Journal.open(path, (change) => this.#keep(change));
    this.#journal = opened.journal;
    if (opened.commits > 200) this.#journal.rewrite([...this.#rowsKept()]);
  }

  /** The table of this name, with what the file held of it. */
  table<Row>(name: string): Table<Row> {
    const table = new Table<Row>(name, (change, before) => this.#record(change, before));
    for (const [, id, value] of this.#kept.get(name) ?? []) table.restore(id, value as Row | null);
    this.#kept.delete(name);
    this.#tables.set(name, table as Table<unknown>);
    return table;
  }

  /** Runs `work`; its puts and removes are on disk when this returns. May be nested: the outermost commits. */
  write<Result>(work: () => Result): Result {
    this.#depth += 1;
    try {
      const result = work();
      if (this.#depth === 1 && this.#changes.length > 0) this.#journal?.append(this.#changes);
      return result;
    } catch (error) {
      if (this.#depth === 1) this.#rollBack();
      throw error;
    } finally {
      this.#depth -= 1;
      if (this.#depth === 0) [this.#changes, this.#undo] = [[], []];
    }
  }

  close(): void {
    this.#journal?.close();
    this.#journal = null;
  }

  #record(change: Change, before: unknown): void {
    if (this.#depth === 0) throw new Error(`A row of ${change[0]} was changed outside a write`);
    this.#changes.push(change);
    this.#undo.push({ table: change[0], id: change[1], before });
  }

  #rollBack(): void {
    for (const { table, id, before } of this.#undo.reverse()) this.#tables.get(table)?.restore(id, before);
  }

  #keep(change: Change): void {
    const changes = this.#kept.get(change[0]) ?? [];
    changes.push(change);
    this.#kept.set(change[0], changes);
  }

  *#rowsKept(): Iterable<Change> {
    for (const [name, changes] of this.#kept) {
      const table = new Table<unknown>(name, () => undefined);
      for (const [, id, value] of changes) table.restore(id, value);
      yield* table.snapshot();
    }
  }
}
