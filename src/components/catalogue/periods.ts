/** A heading of the catalogue: a stretch of time and what it is called. */
export type Period = { heading: string; years: string };

/** Usual dates for Britain and its neighbours, rounded; they shift by a century or two from place to place. */
const periods: (Period & { begins: RegExp })[] = [
  { heading: 'Early Bronze Age', years: 'about 2200 to 1550 BC', begins: /^Early Bronze/ },
  { heading: 'Middle Bronze Age', years: 'about 1550 to 1150 BC', begins: /^Middle Bronze/ },
  { heading: 'Late Bronze Age', years: 'about 1150 to 800 BC', begins: /^(Middle–)?Late Bronze/ },
  { heading: 'Iron Age', years: 'about 800 BC to the Romans', begins: /^Iron/ },
  { heading: 'Middle Ages', years: '12th to 15th century', begins: /^1[2-5]th/ },
  { heading: 'Age of powder', years: '16th and 17th century', begins: /^1[67]th/ },
];

/** The heading a form's period stands under; a period of its own when no heading fits. Middle–Late counts as Late. */
export function periodOf(period: string): Period {
  const late = /^Middle–Late/.test(period);
  const found = periods.find((p) => p.begins.test(period) && (!late || p.heading.startsWith('Late')));
  return found ? { heading: found.heading, years: found.years } : { heading: period, years: '' };
}

/** Forms under their headings, oldest first; headings nobody knows come last. Within one, by name. */
export function byPeriod<T extends { period: string; name: string }>(forms: readonly T[]): [Period, T[]][] {
  const groups = new Map<string, [Period, T[]]>();
  for (const form of [...forms].sort((a, b) => a.name.localeCompare(b.name, 'en'))) {
    const period = periodOf(form.period);
    const group = groups.get(period.heading) ?? [period, []];
    group[1].push(form);
    groups.set(period.heading, group);
  }
  const rank = (heading: string) => {
    const i = periods.findIndex((p) => p.heading === heading);
    return i === -1 ? periods.length : i;
  };
  return [...groups.values()].sort((a, b) => rank(a[0].heading) - rank(b[0].heading));
}
