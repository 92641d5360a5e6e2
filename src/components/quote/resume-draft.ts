import { ESTIMATE_FIELDS } from '../../commission/pricing/estimate-fields';
import { readDraft } from './draft';

/** On the enquiry's page without a piece: goes on with the piece this browser priced last, if there is one. */
export function resumeDraft(): void {
  if (!document.querySelector('[data-bare="yes"]')) return;
  const { estimate } = readDraft();
  const said = ESTIMATE_FIELDS.flatMap((field) => (estimate?.[field] ? [[field, estimate[field]]] : []));
  if (said.length > 0) window.location.replace(`/price/enquire?${new URLSearchParams(said)}`);
}
