import type { SubmitEvent } from 'react';
import type { Choice } from '../../commission/pricing/price-view';
import { AlloyRows } from './AlloyRows';
import { Dimensions } from './Dimensions';
import { HowMany } from './HowMany';
import { Lines } from './Lines';
import { LiveRange } from './LiveRange';
import { Modes } from './Modes';
import { OwnPiece, OwnSizes } from './OwnPiece';
import { Piece, type PieceProps } from './Piece';
import { PriceBar } from './PriceBar';
import { PriceContext } from './price-context';
import { PricePanel } from './PricePanel';
import type { PriceStart } from './price-start';
import { PriceAfter, Reasons } from './Reasons';
import { Treatment } from './Treatment';
import { PRICE_FORM, usePrice } from './use-price';

export interface PricePageProps {
  start: PriceStart;
  forms: readonly Choice[];
  countries: readonly Choice[];
  plate: PieceProps['plate'];
}

/**
 * The price page: a plain form the server answers, and once the rate card is here the same form answered at every
 * change by the same function.
 */
export function PricePage({ start, forms, countries, plate }: PricePageProps) {
  const price = usePrice(start);
  const { fields, view, live, query } = price;
  const own = fields.what === 'own';
  const onSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    if (!live) return;
    event.preventDefault();
    const submitter = event.nativeEvent.submitter;
    const enquires = submitter instanceof HTMLButtonElement && submitter.value === 'enquire';
    if (enquires && view.outcome.ok) return window.location.assign(`/price/enquire?${query}`);
    price.press();
    if (!view.outcome.ok) focusFirst(event.currentTarget, view.outcome.problem.fields);
  };
  return (
    <PriceContext value={price}>
      <form method="get" action="/price" id={PRICE_FORM} onSubmit={onSubmit} noValidate>
        <button className="sr-only" type="submit" name="go" value="reckon" tabIndex={-1} aria-hidden="true">
          Reckon the price
        </button>
        <Modes />
        <div className="price-cope">
          {own ? <OwnPiece /> : <Piece forms={forms} plate={plate} />}
          <div>
            <AlloyRows />
            <Treatment />
          </div>
        </div>
        <hr className="parting-line" />
        <div className="price-drag">
          <div className="price-inputs">
            {own ? <OwnSizes /> : <Dimensions />}
            <HowMany countries={countries} />
          </div>
          <div className="price-side">
            <PricePanel />
            <PriceAfter />
          </div>
          <div className="price-table">
            <Lines />
          </div>
        </div>
        <Reasons />
        <PriceBar />
      </form>
      <LiveRange />
    </PriceContext>
  );
}

/** Puts the reader on the first input that has to change. */
function focusFirst(form: HTMLFormElement, fields: Record<string, string> | undefined) {
  const names = Object.keys(fields ?? {});
  const inputs = [...form.querySelectorAll<HTMLElement>('input, select, textarea')];
  inputs.find((input) => names.includes(input.getAttribute('name') ?? ''))?.focus();
}
