/** A stage payment as agreed, amounts in minor units; `dueAt` is null until its trigger happens. */
export interface AgreedStage {
  id: string;
  position: number;
  label: string;
  currency: string;
  grossMinor: number;
  dueAt: Date | null;
}

/** A line of the ledger, in minor units: received is positive, refunds and fees negative. */
export interface LedgerLine {
  stagePaymentId: string | null;
  kind: 'received' | 'refund' | 'fee' | 'credit' | 'written-off';
  amountMinor: number;
  currency: string;
}

/** Where one stage stands. `later`: not due yet. `on-its-way`: a delayed payment is running. */
export type StageState = 'later' | 'due' | 'overdue' | 'on-its-way' | 'paid';

export interface StageBalance extends AgreedStage {
  paidMinor: number;
  owedMinor: number;
  state: StageState;
}

export interface Balance {
  stages: StageBalance[];
  currency: string;
  agreedMinor: number;
  /** Received less refunded, on these stages. */
  receivedMinor: number;
  /** Money received that fits no stage; the owner's tray says why. */
  unmatchedMinor: number;
  /** Money received in currencies that were not agreed; it fits no stage either. */
  foreign: { currency: string; minor: number }[];
  toComeMinor: number;
  dueMinor: number;
  overdueMinor: number;
}

/**
 * Works out what is paid, due and overdue from the ledger; nothing of this is stored.
 *
 * @param pending ids of stages for which a delayed payment is on its way
 */
export function balanceOf(
  stages: readonly AgreedStage[],
  ledger: readonly LedgerLine[],
  pending: ReadonlySet<string>,
  now: Date,
): Balance {
  const moved = ledger.filter((line) => line.kind === 'received' || line.kind === 'refund' || line.kind === 'credit');
  const list = [...stages]
    .sort((a, b) => a.position - b.position)
    .map((stage) => stageBalance(stage, moved, pending.has(stage.id), now));
  const currency = list[0]?.currency ?? ledger[0]?.currency ?? 'GBP';
  const fits = new Map(list.map((stage) => [stage.id, stage.currency]));
  const stray = moved.filter((line) => !line.stagePaymentId || fits.get(line.stagePaymentId) !== line.currency);
  const sum = (numbers: number[]) => numbers.reduce((total, each) => total + each, 0);
  return {
    stages: list,
    currency,
    agreedMinor: sum(list.map((stage) => stage.grossMinor)),
    receivedMinor: sum(list.map((stage) => stage.paidMinor)),
    unmatchedMinor: sum(stray.filter((line) => line.currency === currency).map((line) => line.amountMinor)),
    foreign: byCurrency(stray.filter((line) => line.currency !== currency)),
    toComeMinor: sum(list.map((stage) => stage.owedMinor)),
    dueMinor: sum(list.filter((stage) => stage.state === 'due' || stage.state === 'overdue').map((s) => s.owedMinor)),
    overdueMinor: sum(list.filter((stage) => stage.state === 'overdue').map((stage) => stage.owedMinor)),
  };
}

function byCurrency(lines: readonly LedgerLine[]): Balance['foreign'] {
  const sums = new Map<string, number>();
  for (const { currency, amountMinor } of lines) sums.set(currency, (sums.get(currency) ?? 0) + amountMinor);
  return [...sums].map(([currency, minor]) => ({ currency, minor }));
}

function stageBalance(stage: AgreedStage, moved: LedgerLine[], pending: boolean, now: Date): StageBalance {
  const own = moved.filter((line) => line.stagePaymentId === stage.id && line.currency === stage.currency);
  const sum = (lines: LedgerLine[]) => lines.reduce((total, line) => total + line.amountMinor, 0);
  const paidMinor = sum(own);
  // What the studio gave back is not owed again.
  const owedMinor = Math.max(0, stage.grossMinor - sum(own.filter((line) => line.kind !== 'refund')));
  const state: StageState =
    owedMinor === 0
      ? 'paid'
      : pending
        ? 'on-its-way'
        : stage.dueAt === null
          ? 'later'
          : stage.dueAt.getTime() < now.getTime()
            ? 'overdue'
            : 'due';
  return { ...stage, paidMinor, owedMinor, state };
}
