import { and, asc, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { Answers, Ask } from '../../commission/enquiry/checklist';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Db, Transaction } from '../db/client';
import { questions } from '../db/schema/commissions';
import { queueStudioMail } from './enquiry-mails';
import { moveDeal } from '../history';
import { queueMail } from '../outbox';
import { dayAfter } from '../quote/promised-days';
import type { Services } from '../services';

export type QuestionRow = typeof questions.$inferSelect;

/** Days after which unanswered questions let an enquiry lapse (T4). */
const LAPSES_AFTER_DAYS = 21;
const MOST_OPEN = 5;

/** All questions of a commission, by round and place. */
export function readQuestions(db: Db, commissionId: string): Promise<QuestionRow[]> {
  return db
    .select()
    .from(questions)
    .where(eq(questions.commissionId, commissionId))
    .orderBy(asc(questions.round), asc(questions.position));
}

/** Asks the customer one to five questions (T2). The very same questions asked twice are asked once. */
export async function askQuestions(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Ask,
): Promise<Outcome<{ round: number }>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const asked = await readQuestions(tx, commission.id);
    const round = asked.at(-1)?.round ?? 0;
    if (
      commission.deal === 'asking' &&
      isSameRound(
        asked.filter((row) => row.round === round),
        input,
      )
    )
      return done({ round });
    const open = asked.filter((row) => row.answer === null).length;
    if (commission.deal === 'asking' && open + input.questions.length > MOST_OPEN)
      return refuse(
        'conflict',
        `${open} questions are still open. Five at once are enough; wait for the answers, or ask fewer.`,
      );
    return putRound(services, tx, commission, actor, input, round + 1);
  });
}

function isSameRound(last: QuestionRow[], input: Ask): boolean {
  return (
    last.length === input.questions.length &&
    last.every((row, index) => row.text === input.questions[index]!.text && row.why === input.questions[index]!.why)
  );
}

async function putRound(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  actor: Actor,
  input: Ask,
  round: number,
): Promise<Outcome<{ round: number }>> {
  const at = services.now();
  const count = input.questions.length;
  const moved = await moveDeal(tx, commission, {
    move: 'T2',
    mover: 'owner',
    actor,
    sentence: count === 1 ? 'The studio asked a question.' : `The studio asked ${count} questions.`,
    public: true,
    at,
    data: { round, questions: input.questions.map((question) => question.text) },
  });
  if (!moved.ok) return moved;
  await tx.insert(questions).values(
    input.questions.map((question, index) => ({
      id: uuidv7(),
      commissionId: commission.id,
      round,
      position: index + 1,
      ...question,
      askedAt: at,
    })),
  );
  await queueMail(tx, {
    letter: 'M3',
    to: commission.email,
    cause: `M3:${commission.id}:${round}`,
    commissionId: commission.id,
    at,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      questions: input.questions,
      lapsesOn: dayAfter(at, LAPSES_AFTER_DAYS),
    },
  });
  return done({ round });
}

/**
 * Keeps the customer's answers, complete or not. With `send` and every required one answered the enquiry goes back to
 * the studio (T3); with some missing it says which, and what was typed is kept all the same.
 */
export async function answerQuestions(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Answers,
): Promise<Outcome<{ open: number; sent: boolean }>> {
  const found = await findCommission(services, actor, ref, 'commission:answer');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (commission.deal !== 'asking') return afterAsking(tx, commission, input);
    await keepAnswers(tx, commission.id, input, services.now());
    const open = (await readQuestions(tx, commission.id)).filter((row) => row.required && row.answer === null);
    if (!input.send) return done({ open: open.length, sent: false });
    if (open.length > 0) return missing(open);
    return sendAnswers(services, tx, commission, actor);
  });
}

async function afterAsking(tx: Transaction, commission: CommissionRow, input: Answers) {
  const known = await readQuestions(tx, commission.id);
  const isRepeat = Object.entries(input.answers).every(([id, answer]) =>
    known.some((row) => row.id === id && row.answer === answer),
  );
  if (isRepeat && known.length > 0) return done({ open: 0, sent: true });
  return refuse(
    'conflict',
    'Your answers have been sent already. If something should be added, write it to us as a message.',
  );
}

async function keepAnswers(tx: Transaction, commissionId: string, input: Answers, at: Date): Promise<void> {
  for (const [id, answer] of Object.entries(input.answers)) {
    await tx
      .update(questions)
      .set({ answer: answer === '' ? null : answer, answeredAt: answer === '' ? null : at })
      .where(and(eq(questions.id, id), eq(questions.commissionId, commissionId)));
  }
}

function missing(open: QuestionRow[]) {
  const fields = Object.fromEntries(open.map((row) => [`answers.${row.id}`, 'This one is still without an answer.']));
  const what = open.length === 1 ? 'One question is' : `${open.length} questions are`;
  return refuse(
    'invalid',
    `${what} still without an answer. What you wrote is saved; answer the rest and send.`,
    fields,
  );
}

async function sendAnswers(services: Services, tx: Transaction, commission: CommissionRow, actor: Actor) {
  const at = services.now();
  const moved = await moveDeal(tx, commission, {
    move: 'T3',
    mover: 'customer',
    actor,
    sentence: 'The customer answered every question.',
    public: true,
    at,
  });
  if (!moved.ok) return moved;
  await queueStudioMail(tx, commission, 'answers', at);
  return done({ open: 0, sent: true });
}
