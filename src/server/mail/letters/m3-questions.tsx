import { dayInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { P, Part, Small } from './letter-parts';

/** Questions to the customer, each with its reason; answered on the page, in as many goes as they like. */
export const m3 = letter('M3', {
  subject: ({ ref, questions }) =>
    questions.length === 1 ? `A question about ${ref}` : `${questions.length} questions about ${ref}`,
  body: (data) => ({
    heading: data.questions.length === 1 ? 'One question before we can go on' : 'A few questions before we can go on',
    preview: data.questions[0]?.text ?? '',
    about: data,
    name: data.name,
    lead: (
      <P>
        We have read your enquiry and would like to make a sound estimate.{' '}
        {data.questions.length === 1 ? 'For that we need to know one more thing.' : 'For that we need to know this.'}
      </P>
    ),
    next: {
      turn: 'yours',
      words: `Answer on the page; each answer is saved as you go, so you can stop and come back.${data.lapsesOn ? ` We keep the enquiry open until ${dayInWords(data.lapsesOn)}, and it is easily opened again after that.` : ''}`,
    },
    link: { to: `${pageOf(data)}#questions`, label: 'Answer on the page' },
    details: data.questions.map((question, index) => (
      <Part key={index} title={`${index + 1}. ${question.text}`}>
        <Small>Why we ask: {question.why}</Small>
      </Part>
    )),
  }),
});
