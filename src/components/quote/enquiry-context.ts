import { createContext, useContext } from 'react';
import type { WordFields } from '../../commission/enquiry/enquiry-words';
import type { EnquiryPage } from './use-enquiry';

/** The running form, and what it began with. */
export type EnquiryState = EnquiryPage & { words: WordFields };

export const EnquiryContext = createContext<EnquiryState | null>(null);

/** The enquiry form's state. @throws outside the form: a fault of the code */
export function useEnquiryState(): EnquiryState {
  const state = useContext(EnquiryContext);
  if (!state) throw new Error('a part of the enquiry form stands outside it');
  return state;
}
