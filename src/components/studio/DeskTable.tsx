import type { UseFormReturn } from 'react-hook-form';
import { atRepour, unitCostMinor, type CostLine } from '../../commission/pricing/cost-lines';
import type { DeskFields } from '../../commission/pricing/desk-fields';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';

interface DeskTableProps {
  form: UseFormReturn<DeskFields>;
  /** The rows as they were when the page was drawn; new ones are at the end. */
  rows: DeskFields['lines'];
  draft: QuoteDraft;
  /** Sentence of each field that cannot be read, by its name. */
  errors: Record<string, string>;
  /** Cost line each row reads as now, in the rows' order; null where it cannot be read or is left out. */
  lines: readonly (CostLine | null)[];
}

const GROUPS: Record<CostLine['group'], string> = {
  'before-gate': 'Once, before gate A',
  'after-gate': 'Once, after gate A',
  attempt: 'Each mould poured',
  metal: 'Metal of a sound piece',
  hand: 'Hand work on a piece',
  sundries: 'Bought in',
};

const REPOUR = { again: 'again at each re-pour', partly: 'partly lost at a late fault', no: null } as const;
const major = (minor: number) => (minor / 100).toFixed(2);

/** The cost lines as a table to type into: hours, rate and materials; what one of each comes to stands at the right. */
export function DeskTable({ form, rows, draft, errors, lines }: DeskTableProps) {
  return (
    <table className="desk-table">
      <caption className="sr-only">Cost lines, in {draft.currency.studio}, without tax</caption>
      <thead>
        <tr>
          <th scope="col">Line</th>
          <th scope="col" className="amount">
            Hours
          </th>
          <th scope="col" className="amount">
            An hour
          </th>
          <th scope="col" className="amount">
            Materials
          </th>
          <th scope="col" className="amount">
            Cost
          </th>
        </tr>
      </thead>
      <tbody>
        {rows.map((row, index) => (
          <DeskRow
            key={row.id || `new-${index}`}
            form={form}
            row={row}
            index={index}
            known={draft.lines.find((line) => line.id === row.id)}
            line={lines[index] ?? null}
            errors={errors}
          />
        ))}
      </tbody>
    </table>
  );
}

interface DeskRowProps extends Pick<DeskTableProps, 'form' | 'errors'> {
  row: DeskFields['lines'][number];
  index: number;
  known: CostLine | undefined;
  line: CostLine | null;
}

function DeskRow({ form, row, index, known, line, errors }: DeskRowProps) {
  const name = <K extends keyof DeskFields['lines'][number]>(field: K) => `lines.${index}.${field}` as const;
  const unfollow = () => row.follows && form.setValue(name('follows'), false);
  const faults = Object.entries(errors).filter(([path]) => path.startsWith(`lines.${index}.`));
  const cell = (field: 'minutes' | 'rateMinorPerHour' | 'materialsMinor', label: string) => (
    <td className="amount" data-label={label}>
      <input
        className="input-line desk-figure"
        id={name(field)}
        inputMode="decimal"
        autoComplete="off"
        aria-label={`${label}, ${row.label || 'another line'}`}
        aria-invalid={errors[name(field)] ? true : undefined}
        defaultValue={row[field]}
        {...form.register(name(field), { onChange: () => unfollow() })}
      />
    </td>
  );
  return (
    <tr className="desk-line">
      <th scope="row">
        {row.label || 'Another line'}
        {known && REPOUR[atRepour(known)] && <span className="again">{REPOUR[atRepour(known)]}</span>}
        <DeskRowMore form={form} row={row} index={index} known={known} errors={errors} isOpen={faults.length > 0} />
        {faults.map(([path, sentence]) => (
          <span className="error block" key={path}>
            {sentence}
          </span>
        ))}
      </th>
      {cell('minutes', 'Hours')}
      {cell('rateMinorPerHour', 'An hour')}
      {cell('materialsMinor', 'Materials')}
      <td className="amount" data-label="Cost">
        {line ? major(unitCostMinor(line)) : '–'}
      </td>
    </tr>
  );
}

function DeskRowMore({ form, row, index, known, errors, isOpen }: Omit<DeskRowProps, 'line'> & { isOpen: boolean }) {
  const at = `lines.${index}` as const;
  const isNew = row.id === '';
  return (
    <details open={isOpen ? true : undefined}>
      <summary>{isNew ? 'Write it in' : known?.minutes === 0 && known.driver ? known.driver : 'More'}</summary>
      <input type="hidden" defaultValue={row.id} {...form.register(`${at}.id`)} />
      <div className="mt-1 grid gap-2 font-normal">
        <label className="grid gap-1">
          <span className="text-small text-muted">Name</span>
          <input
            className="input"
            id={`${at}.label`}
            aria-invalid={errors[`${at}.label`] ? true : undefined}
            defaultValue={row.label}
            {...form.register(`${at}.label`)}
          />
        </label>
        <label className="grid gap-1">
          <span className="text-small text-muted">Where it belongs</span>
          <select className="input" id={`${at}.group`} defaultValue={row.group} {...form.register(`${at}.group`)}>
            {Object.entries(GROUPS).map(([value, label]) => (
              <option key={value} value={value}>
                {label}
              </option>
            ))}
          </select>
        </label>
        <label className="grid gap-1">
          <span className="text-small text-muted">If it costs nothing, why</span>
          <input
            className="input"
            id={`${at}.zeroReason`}
            aria-invalid={errors[`${at}.zeroReason`] ? true : undefined}
            defaultValue={row.zeroReason}
            {...form.register(`${at}.zeroReason`)}
          />
        </label>
        {row.follows && (
          <label className="choice">
            <input type="checkbox" value="yes" defaultChecked {...form.register(`${at}.follows`)} />
            <span>Reckon it from the masses and the metal’s price</span>
          </label>
        )}
        {!isNew && (
          <label className="choice">
            <input type="checkbox" value="yes" defaultChecked={row.drop} {...form.register(`${at}.drop`)} />
            <span>Leave this line out</span>
          </label>
        )}
      </div>
    </details>
  );
}
