import { expect, it } from 'vitest';
import { STORIES } from '../../src/demo/stories/all';

/** A Thursday just after midnight: pour days are Thursdays, so the two weeks from here meet every case. */
const FIRST = new Date('2027-03-04T00:07:00Z');

it('tells every story in order and in the past, on whatever day and hour the demo is planted', () => {
  const hours = [0, 7, 13, 23.9];
  const days = Array.from({ length: 14 }, (_, day) => day);
  const wrong = days.flatMap((day) =>
    hours.flatMap((hour) => {
      const now = new Date(FIRST.getTime() + (day * 24 + hour) * 60 * 60_000);
      return STORIES.filter((story) => {
        const times = story.map((step) => step.at(now).getTime());
        return times.some((time, i) => time > now.getTime() || (i > 0 && time < times[i - 1]!));
      }).map(() => now.toISOString());
    }),
  );
  expect(wrong).toEqual([]);
});
