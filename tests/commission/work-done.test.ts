// One schema is type, form and server rule: what a phone may send from the bench, and what it may not.
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  dispatchSchema,
  minutesSchema,
  scrapSchema,
  stageDoneSchema,
  timerSchema,
} from '../../src/commission/making/work-done';

const entry = { clientId: 'entry-000001', piece: '1' };
const wrongAt = (parsed: ReturnType<typeof stageDoneSchema.safeParse>) =>
  parsed.success ? [] : parsed.error.issues.map((issue) => issue.path[0]);

describe('a stage as a plain form sends it', () => {
  it('is read with numbers as numbers and empty fields as absent', () => {
    const form = { ...entry, from: 'finished', to: 'inspected', massG: ' 724 ', balanceMm: '', note: '  ', heatNo: '' };
    expect(stageDoneSchema.parse(form)).toMatchObject({ piece: 1, massG: 724, balanceMm: undefined, note: '' });
  });

  it('needs its own id, a piece and stages of the trade', () => {
    const good = { ...entry, from: 'mould', to: 'poured' };
    expect(stageDoneSchema.safeParse(good).success).toBe(true);
    expect(wrongAt(stageDoneSchema.safeParse({ ...good, clientId: 'short' }))).toEqual(['clientId']);
    expect(wrongAt(stageDoneSchema.safeParse({ ...good, clientId: "x'; drop table" }))).toEqual(['clientId']);
    expect(wrongAt(stageDoneSchema.safeParse({ ...good, piece: '0' }))).toEqual(['piece']);
    expect(wrongAt(stageDoneSchema.safeParse({ ...good, to: 'sent' }))).toEqual(['to']);
    expect(wrongAt(stageDoneSchema.safeParse({ ...good, note: 'x'.repeat(501) }))).toEqual(['note']);
  });

  it('takes every whole mass of 1 g to 50 kg and no other', () => {
    const read = (massG: unknown) => stageDoneSchema.safeParse({ ...entry, from: 'mould', to: 'poured', massG });
    fc.assert(fc.property(fc.integer({ min: 1, max: 50_000 }), (massG) => read(`${massG}`).success));
    fc.assert(
      fc.property(
        fc.oneof(fc.integer({ max: 0 }), fc.integer({ min: 50_001 }), fc.constantFrom(0.5, '7,5', 'NaN', 'Infinity')),
        (massG) => {
          expect(wrongAt(read(massG))).toEqual(['massG']);
        },
      ),
    );
  });
});

it('a scrap keeps a photo only by its id', () => {
  const scrap = { ...entry, from: 'poured', cause: 'misrun' };
  expect(scrapSchema.parse({ ...scrap, photo: '' }).photo).toBeUndefined();
  expect(scrapSchema.safeParse({ ...scrap, photo: '../../etc/passwd' }).success).toBe(false);
  expect(scrapSchema.parse({ ...scrap, photo: '0190c0de-0000-7000-8000-000000000000' }).photo).toBeDefined();
});

it('minutes of more than twelve hours at once are a forgotten timer', () => {
  const read = (minutes: unknown) =>
    minutesSchema.safeParse({ clientId: 'entry-000001', operation: 'Fettling', minutes });
  expect([read('1').success, read(720).success]).toEqual([true, true]);
  const late = read(721);
  expect(late.success ? '' : late.error.issues[0]!.message).toContain('forgotten timer');
  expect(timerSchema.safeParse({ action: 'pause', operation: 'Fettling' }).success).toBe(false);
});

it('a parcel needs a carrier, a number and its looks; an adult signs only when it is ticked', () => {
  const parcel = { carrier: 'Estuary Parcels', tracking: 'EP 100', parcel: 'A flat box' };
  expect(dispatchSchema.parse(parcel).adultSignature).toBe(false);
  expect(dispatchSchema.parse({ ...parcel, adultSignature: 'on' }).adultSignature).toBe(true);
  for (const field of Object.keys(parcel)) {
    expect(dispatchSchema.safeParse({ ...parcel, [field]: ' ' }).success, field).toBe(false);
  }
});
