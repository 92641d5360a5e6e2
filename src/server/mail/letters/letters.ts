import { render } from '@react-email/render';
import { createElement } from 'react';
import type { LetterData } from '../letter-data';
import type { LetterId } from '../letter-ids';
import type { Frame, RenderedLetter } from '../render';
import type { Letter } from './letter';
import { LetterLayout } from './letter-layout';
import { writeText } from './letter-text';
import { m0 } from './m0-sign-in';
import { m1 } from './m1-enquiry-received';
import { m2 } from './m2-enquiry-in';
import { m3 } from './m3-questions';
import { m5 } from './m5-declined';
import { m6 } from './m6-estimate';
import { m7 } from './m7-quote';
import { m8 } from './m8-revised-quote';
import { m11 } from './m11-accepted';
import { m12 } from './m12-payment-booked';
import { m13 } from './m13-deposit-not-seen';
import { m14 } from './m14-about-to-start';
import { m15 } from './m15-gate-open';
import { m16 } from './m16-gate-approved';
import { m19 } from './m19-progress';
import { m20 } from './m20-pour-failed';
import { m23 } from './m23-finished';
import { m24 } from './m24-sent';
import { m26 } from './m26-delivered';

/** Every letter, by its number in the mail catalogue. */
export const LETTERS: { [L in LetterId]: Letter<L> } = {
  M0: m0,
  M1: m1,
  M2: m2,
  M3: m3,
  M5: m5,
  M6: m6,
  M7: m7,
  M8: m8,
  M11: m11,
  M12: m12,
  M13: m13,
  M14: m14,
  M15: m15,
  M16: m16,
  M19: m19,
  M20: m20,
  M23: m23,
  M24: m24,
  M26: m26,
};

/** Writes one letter: its subject, and what it says as HTML and as plain text. */
export async function writeLetter<L extends LetterId>(
  id: L,
  data: LetterData[L],
  frame: Frame,
): Promise<RenderedLetter> {
  const { subject, body } = LETTERS[id];
  const html = await render(createElement(LetterLayout, { content: body(data, frame), frame }));
  return { subject: subject(data, frame), html, text: writeText(html) };
}
