import { letter, pageOf } from './letter';
import { Facts, P, Part } from './letter-parts';

/** Sent: who carries it, who must sign, what duties may come, what the parcel looks like. */
export const m24 = letter('M24', {
  subject: ({ ref }) => `${ref} is on its way`,
  body: (data) => ({
    heading: 'On its way to you',
    preview: `With ${data.carrier}, number ${data.tracking}.`,
    about: data,
    name: data.name,
    lead: (
      <P>
        {data.carrier} has your parcel. Until it is in your hands the risk is ours.
        {data.adultMustSign && ' An adult must take it in and sign for it.'}
      </P>
    ),
    next: {
      turn: 'yours',
      words: `${data.adultMustSign ? 'Have an adult at home to sign. ' : ''}When it is there, say so on the page; if it does not come, write to us and we look for it.`,
    },
    link: { to: pageOf(data), label: 'Follow it from your page' },
    details: (
      <>
        <Part title="The parcel">
          <Facts
            rows={[
              { label: 'Carrier', value: data.carrier },
              { label: 'Tracking number', value: data.tracking },
              {
                label: 'Signature',
                value: data.adultMustSign ? 'By an adult, with proof of age' : 'By anyone at the address',
              },
              { label: 'Looks like', value: data.parcel },
            ]}
          />
        </Part>
        <Part title="Duties">
          <P>{data.duties ?? 'None: the parcel crosses no customs border.'}</P>
        </Part>
      </>
    ),
  }),
});
