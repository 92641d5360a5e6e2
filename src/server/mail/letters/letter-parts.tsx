import type { ReactNode } from 'react';
import { Heading, Img, Section, Text } from '@react-email/components';
import type { Fact, Money, Picture, StagePaymentLine } from '../letter-data';
import { moneyInWords } from '../letter-words';
import { LOOK } from './letter-style';

/** A paragraph. */
export function P({ children }: { children: ReactNode }) {
  return <Text style={LOOK.text}>{children}</Text>;
}

/** A paragraph of lesser weight. */
export function Small({ children }: { children: ReactNode }) {
  return <Text style={LOOK.small}>{children}</Text>;
}

/** A titled part of the details. */
export function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <Section>
      <Heading as="h2" style={LOOK.heading}>
        {title}
      </Heading>
      {children}
    </Section>
  );
}

/** A figure that is read first. */
export function Figure({ children }: { children: ReactNode }) {
  return <Text style={LOOK.figure}>{children}</Text>;
}

/** Facts, a row each. */
export function Facts({ rows }: { rows: readonly Fact[] }) {
  return (
    <table className="facts" style={LOOK.table}>
      <tbody>
        {rows.map((row) => (
          <tr key={row.label}>
            <th scope="row" style={LOOK.label}>
              {row.label}
            </th>
            <td style={LOOK.value}>{row.value}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** A line of money. */
export interface Sum {
  label: string;
  hint?: string;
  amount: Money;
  strong?: boolean;
}

/** Sums of money under each other, right-aligned. */
export function Sums({ rows }: { rows: readonly Sum[] }) {
  return (
    <table className="facts" style={LOOK.table}>
      <tbody>
        {rows.map((row) => (
          <tr key={row.label}>
            <th scope="row" style={row.strong ? { ...LOOK.sumLabel, ...LOOK.strong } : LOOK.sumLabel}>
              {row.label}
              {row.hint && <span style={LOOK.faint}>, {row.hint}</span>}
            </th>
            <td style={row.strong ? { ...LOOK.sum, ...LOOK.strong } : LOOK.sum}>{moneyInWords(row.amount)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** The stage payments of a quote as sums. */
export function stageSums(stages: readonly StagePaymentLine[]): Sum[] {
  return stages.map(({ label, when, amount }) => ({ label, hint: when, amount }));
}

/** Short points in no order. */
export function Points({ items }: { items: readonly string[] }) {
  return (
    <ul style={LOOK.list}>
      {items.map((item) => (
        <li key={item} style={LOOK.item}>
          {item}
        </li>
      ))}
    </ul>
  );
}

/** Words a person at the studio wrote themselves; their line breaks stay. */
export function Note({ words }: { words: string }) {
  return (
    <Section style={LOOK.note}>
      {words
        .split(/\n+/)
        .filter((line) => line.trim())
        .map((line, index) => (
          <Text key={index} style={LOOK.turnText}>
            {line}
          </Text>
        ))}
    </Section>
  );
}

/** Photos with their captions; one that does not travel inside the mail is told by its caption alone. */
export function Pictures({ pictures, enclosed }: { pictures: readonly Picture[]; enclosed: readonly string[] }) {
  return (
    <>
      {pictures.map(({ photoId, caption, alt }) => (
        <Section key={photoId}>
          {enclosed.includes(photoId) && (
            <Img src={`cid:${photoId}`} alt={alt || caption} width="552" style={LOOK.picture} />
          )}
          <Text style={LOOK.caption}>{enclosed.includes(photoId) ? caption : `On your page: ${caption}`}</Text>
        </Section>
      ))}
    </>
  );
}
