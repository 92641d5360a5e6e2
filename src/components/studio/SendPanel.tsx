import { formatMoney } from '../../commission/money';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { Button } from '../ui/Button';
import { Checkbox } from '../ui/Checkbox';

interface SendPanelProps {
  reference: string;
  revision: number;
  /** The saved draft's version; exactly this one is sent. */
  version: number;
  draft: QuoteDraft;
  priced: PricedQuote;
  customer: string;
}

/** The last look before a revision is sent: names what will be frozen, and sends it. Works as a plain form. */
export function SendPanel({ reference, revision, version, draft, priced, customer }: SendPanelProps) {
  const blocking = priced.warnings.filter((warning) => warning.blocking);
  const total = formatMoney(priced.totals.grossMinor, priced.quoted);
  return (
    <section className="panel-yours mt-8" id="send" aria-labelledby="send-title" tabIndex={-1}>
      <h2 id="send-title">Send revision {revision}</h2>
      <p className="mt-2">
        From the moment it is sent, revision {revision} is frozen: {draft.lines.length} cost lines with their rates, the
        margin, the price of {total} for {draft.title}, its {priced.stages.length} payments, the target mass of{' '}
        {draft.massesG.finished} g, {draft.dateRange.earliestWeeks} to {draft.dateRange.latestWeeks} weeks, the terms{' '}
        {draft.termsVersion} and a fingerprint over all of it.
        {revision > 1 &&
          ` Revision ${revision - 1} is withdrawn in the same stroke and can no longer be accepted.`}{' '}
        {customer} gets a mail and sees no cost line, margin or chance.
      </p>
      {blocking.length > 0 ? (
        <ul className="mt-3 font-[650] text-loss-ink">
          {blocking.map((warning) => (
            <li key={warning.message}>{warning.message}</li>
          ))}
        </ul>
      ) : (
        <form method="post" action={`/api/commissions/${reference}/quotes`} className="mt-4 grid gap-4" data-once="">
          <input type="hidden" name="version" value={version} />
          <input type="hidden" name="revision" value={revision} />
          <Checkbox name="freeze" required>
            I have read what will be frozen
          </Checkbox>
          <div>
            <Button kind="main">Send revision {revision} now</Button>
          </div>
        </form>
      )}
    </section>
  );
}
