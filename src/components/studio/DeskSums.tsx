import { formatMoney, type Currency } from '../../commission/money';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { Distribution } from '../ui/Distribution';

interface DeskSumsProps {
  draft: QuoteDraft;
  priced: PricedQuote;
}

const count = (value: number) => String(Number(value.toFixed(1)));
const percent = (share: number) => `${(share * 100).toFixed(1)} %`;
const whole = (minor: number, currency: Currency) => formatMoney(minor, currency, { pence: 'whole' });
const STAGES = { deposit: 'Deposit', 'gate-a': 'At gate A', balance: 'Before dispatch' } as const;

/** What a commission may cost the studio, as bars with the price across them, and the figures that go with it. */
export function CostSums({ draft, priced }: DeskSumsProps) {
  const { cost, bins, studio, workMinor } = priced;
  const { alpha, beta } = draft.soundness;
  return (
    <section aria-labelledby="may-cost">
      <h2 id="may-cost">What it may cost us</h2>
      <div className="mt-3">
        <Distribution
          bars={bins.map((bin) => ({ from: bin.fromMinor, to: bin.toMinor, share: bin.probability }))}
          currency={studio}
          price={workMinor}
          caption={`What the work may cost, with the price of ${whole(workMinor, studio)} across it`}
        />
      </div>
      <dl className="sum-facts mt-4">
        <dt>Expected</dt>
        <dd>{formatMoney(Math.round(cost.expected), studio)}</dd>
        <dt>4 in 5 below</dt>
        <dd>{formatMoney(Math.round(cost.p80), studio)}</dd>
        <dt>Sound at first pour</dt>
        <dd>
          {count(alpha)} in {count(alpha + beta)}
        </dd>
        <dt>Chance of a loss</dt>
        <dd className={priced.chanceOfLoss > 0.2 ? 'text-loss-ink' : undefined}>{percent(priced.chanceOfLoss)}</dd>
        <dt>Margin we expect</dt>
        <dd className={priced.expectedMargin < 0 ? 'text-loss-ink' : undefined}>{percent(priced.expectedMargin)}</dd>
      </dl>
    </section>
  );
}

/** The price asked, its stages and what goes on the quote's last line. */
export function PriceSums({ draft, priced }: DeskSumsProps) {
  const { quoted, studio, documentLines, stages, totals, exposure } = priced;
  const work = documentLines.find((line) => line.id === 'work');
  return (
    <dl className="sum-facts mt-4">
      <dt>Work price</dt>
      <dd className="figure settling" key={priced.workMinor}>
        {whole(work?.netMinor ?? priced.workMinor, quoted)}
      </dd>
      {stages.map((stage) => (
        <Row key={stage.id} label={STAGES[stage.id]} value={whole(stage.netMinor, quoted)} />
      ))}
      <Row
        label={draft.tax.kind === 'export' ? 'Total, export' : `Total with ${count(draft.tax.rate * 100)} % tax`}
        value={formatMoney(totals.grossMinor, quoted)}
      />
      <Row label="Leaves us" value={`${draft.dateRange.earliestWeeks} to ${draft.dateRange.latestWeeks} weeks`} />
      <Row label="Stands for" value={`${draft.validityDays} days`} />
      <Row label="Terms" value={draft.termsVersion} />
      <Row
        label="Covered before fettling"
        value={
          exposure.shortfallMinor > 0
            ? `${formatMoney(exposure.shortfallMinor, studio)} short`
            : 'all that is committed'
        }
      />
    </dl>
  );
}

function Row({ label, value }: { label: string; value: string }) {
  return (
    <>
      <dt>{label}</dt>
      <dd>{value}</dd>
    </>
  );
}
