import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { ownerAddresses } from '../people/owners';
import { queueMail } from '../outbox';
import { dayAfter, firstDue } from './promised-days';
import type { QuoteRow } from './quote-body';
import { quoteFacts } from './quote-mails';

/** Queues M11 to the customer and to every owner: the copy of what was agreed. */
export async function queueAcceptanceMails(
  tx: Transaction,
  commission: CommissionRow,
  quote: QuoteRow,
  typedName: string,
  at: Date,
): Promise<void> {
  const facts = {
    ...quoteFacts(commission, quote),
    quoteSha256: quote.sha256,
    typedName,
    acceptedAt: at.toISOString(),
    payFirst: quoteFacts(commission, quote).stages[0]!.amount,
    payBy: dayAfter(firstDue(commission.buyer, at), 0),
    ...(commission.buyer?.netDays ? { onCredit: true } : {}),
  };
  const mail = { letter: 'M11' as const, commissionId: commission.id, at };
  await queueMail(tx, {
    ...mail,
    to: commission.email,
    cause: `M11:${quote.id}`,
    data: { ...facts, reader: 'customer' },
  });
  for (const owner of await ownerAddresses(tx)) {
    await queueMail(tx, {
      ...mail,
      to: owner.email,
      cause: `M11:${quote.id}:${owner.email}`,
      data: { ...facts, reader: 'owner', name: owner.name },
    });
  }
}
