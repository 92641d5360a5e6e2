import type { EstimateFields } from '../../commission/pricing/estimate-fields';
import type { WordFields } from '../../commission/enquiry/enquiry-words';
import type { Problem } from '../../commission/problem';

/** What the enquiry's form begins with. */
export interface EnquiryStart {
  /** The estimate's inputs, which travel with the enquiry unseen. */
  estimate: EstimateFields;
  words: WordFields;
  /** Files named by a form that was sent and refused. */
  uploads: string[];
  problem: Problem | null;
  bladed: boolean;
  /** The signed-in customer's address, which cannot be another; null for a guest. */
  ownAddress: string | null;
  /** The metal that measured files are weighed in. */
  alloy: { name: string; densityGPerCm3: number } | null;
}
