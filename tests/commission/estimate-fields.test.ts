import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  estimateQuery,
  ownChoices,
  readFields,
  settleFields,
  spokenQuery,
  type EstimateFields,
} from '../../src/commission/pricing/estimate-fields';
import { reckon } from '../../src/commission/pricing/price-view';
import { card, forms } from './card';
import { anyFields } from './any-fields';

const first = forms[0]!.slug;
const settle = (fields: EstimateFields, sized?: string) => settleFields(fields, sized, card, first);
const throughAddress = (fields: EstimateFields) => settle(readFields(new URLSearchParams(estimateQuery(fields, card))));

describe('an estimate in a page’s address', () => {
  it('comes back as the same estimate', () => {
    fc.assert(
      fc.property(anyFields, (typed) => {
        const fields = settle(typed);
        expect(reckon(throughAddress(fields), card)).toEqual(reckon(fields, card));
      }),
      { numRuns: 150 },
    );
  });

  it('says nothing of what the page shows by itself', () => {
    for (const form of forms) {
      expect(estimateQuery(settle({ form: form.slug }), card)).toBe(`form=${form.slug}`);
    }
  });

  it('takes the last of several, and no name it does not know', () => {
    expect(readFields(new URLSearchParams('what=form&what=own&margin=0&massG=5'))).toEqual({ what: 'own', massG: '5' });
  });

  it('keeps every word typed, also one that no estimate takes', () => {
    expect(spokenQuery({ lengthMm: '62o', pieces: ' ' })).toBe('lengthMm=62o');
  });
});

describe('another form', () => {
  const sword = forms.find(({ slug }) => slug === 'leaf-shaped-sword')!;
  const typed = { ...ownChoices(sword), lengthMm: '640', edge: 'blunt', haft: 'horn-plates', pieces: '3' };

  it('starts from its own sizes and keeps what fits', () => {
    const fields = settle({ ...typed, form: 'flat-axe' }, 'leaf-shaped-sword');
    expect(fields).toMatchObject({ form: 'flat-axe', lengthMm: '142', widthMm: '62', pieces: '3', alloy: 'TB88' });
    expect(fields.haft).toBe('none');
    expect(reckon(fields, card).ok).toBe(true);
  });

  it('keeps the sizes while the form stays, and over a look at a piece of one’s own', () => {
    expect(settle(typed, 'leaf-shaped-sword')).toMatchObject({ lengthMm: '640', edge: 'blunt', haft: 'horn-plates' });
    const own = settle({ ...typed, what: 'own' }, 'leaf-shaped-sword');
    expect(own).toMatchObject({ what: 'own', lengthMm: '640', haft: 'none' });
    expect(settle({ ...own, what: 'form' }, 'leaf-shaped-sword')).toMatchObject({ lengthMm: '640', form: sword.slug });
  });

  it('refuses an address that asks for what the form does not come in', () => {
    const outcome = reckon(settle({ form: 'leaf-shaped-sword', alloy: 'RB85' }), card);
    expect(outcome.ok ? {} : outcome.problem.fields).toHaveProperty('alloy');
  });
});
