import { Link } from '@react-email/components';
import { letter } from './letter';
import { Facts, P, Part, Points } from './letter-parts';
import { LOOK } from './letter-style';

const ACTS = [
  { hash: 'ask', label: 'Ask a question' },
  { hash: 'estimate', label: 'Send an estimate' },
  { hash: 'decline', label: 'Decline' },
];

/** To the owner: an enquiry came in, or answers to our questions. */
export const m2 = letter('M2', {
  subject: ({ ref, title, kind }) => (kind === 'enquiry' ? `Enquiry ${ref}: ${title}` : `Answers to ${ref}: ${title}`),
  body: (data, { publicUrl }) => {
    const page = `/studio/commissions/${data.ref}`;
    return {
      heading: data.kind === 'enquiry' ? 'An enquiry came in' : 'Our questions are answered',
      preview: `${data.customer}, ${data.missing.length === 0 ? 'nothing missing' : `${data.missing.length} missing`}.`,
      about: data,
      toStudio: true,
      name: data.name,
      lead: (
        <P>
          {data.customer} {data.kind === 'enquiry' ? 'asks for this piece' : 'has answered what we asked'}.{' '}
          {filesInWords(data.files)}
        </P>
      ),
      next: { turn: 'yours', words: 'Ask, estimate, quote or decline. The customer has been told when we answer.' },
      link: { to: page, label: 'Open the enquiry' },
      details: (
        <>
          <Part title="In short">
            <Facts rows={data.summary} />
          </Part>
          <Part title="Missing">
            {data.missing.length > 0 ? <Points items={data.missing} /> : <P>Nothing from the checklist.</P>}
          </Part>
          <Part title="Straight to">
            <P>
              {ACTS.map(({ hash, label }, index) => (
                <span key={hash}>
                  {index > 0 && ' · '}
                  <Link href={`${publicUrl}${page}#${hash}`} style={LOOK.link}>
                    {label}
                  </Link>
                </span>
              ))}
            </P>
          </Part>
        </>
      ),
    };
  },
});

function filesInWords(files: number): string {
  if (files === 0) return 'No files came with it.';
  return files === 1 ? 'One file is on the page.' : `${files} files are on the page.`;
}
