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
  const known = new Set(list.map((stage) => stage.id));
  const sum = (numbers: number[]) => numbers.reduce((total, each) => total + each, 0);
  return {
    stages: list,
    currency: list[0]?.currency ?? ledger[0]?.currency ?? 'GBP',
    agreedMinor: sum(list.map((stage) => stage.grossMinor)),
    receivedMinor: sum(list.map((stage) => stage.paidMinor)),
    unmatchedMinor: sum(
      moved.filter((line) => !line.stagePaymentId || !known.has(line.stagePaymentId)).map((l) => l.amountMinor),
    ),
    toComeMinor: sum(list.map((stage) => stage.owedMinor)),
    dueMinor: sum(list.filter((stage) => stage.state === 'due' || stage.state === 'overdue').map((s) => s.owedMinor)),
    overdueMinor: sum(list.filter((stage) => stage.state === 'overdue').map((stage) => stage.owedMinor)),
  };
}

function stageBalance(stage: AgreedStage, moved: LedgerLine[], pending: boolean, now: Date): StageBalance {
  const paidMinor = moved
    .filter((line) => line.stagePaymentId === stage.id && line.currency === stage.currency)
    .reduce((total, line) => total + line.amountMinor, 0);
  const owedMinor = Math.max(0, stage.grossMinor - paidMinor);
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
