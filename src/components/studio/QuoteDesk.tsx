import { useEffect, useState, type SyntheticEvent } from 'react';
import { useForm, type UseFormReturn } from 'react-hook-form';
import { BLANK_LINE, type DeskFields } from '../../commission/pricing/desk-fields';
import { followsMasses } from '../../commission/pricing/follow-masses';
import type { Problem } from '../../commission/problem';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { Button } from '../ui/Button';
import { FormProblem } from '../ui/FormProblem';
import { Notice } from '../ui/Notice';
import { differencesOf, linesOfRows, readDesk, typedBefore, type DeskReading } from './desk-reading';
import type { DeskChoices } from '../../commission/pricing/desk-choices';
import { DeskBasis } from './DeskBasis';
import { DeskPrice } from './DeskPrice';
import { CostSums, PriceSums } from './DeskSums';
import { DeskTable } from './DeskTable';
import { DeskWords } from './DeskWords';
import { saveDesk, savedDesk } from './save-desk';
import { SendPanel } from './SendPanel';

export interface QuoteDeskProps {
  /** The commission's number. */
  reference: string;
  customer: string;
  revision: number;
  /** The draft as it is saved, or as it comes from the estimate. */
  draft: QuoteDraft;
  choices: DeskChoices;
  /** What the fields show: the draft's own values, or what a refused form had typed. */
  fields: DeskFields;
  problem: Problem | null;
  /** What differs between the saved draft and what was typed, after another window saved first. */
  differences: string[];
  /** Opens with the last look before sending. */
  review: boolean;
  ratesChanged: boolean;
}

const FORM = 'desk';

/** The quote desk: every cost line to type into, priced again at each key, saved and sent through the same doors as without scripts. */
export function QuoteDesk(props: QuoteDeskProps) {
  const { reference, draft, fields } = props;
  const desk = useDesk(props);
  const { form, reading, rows, standing } = desk;
  const errors = { ...standing.problem?.fields, ...reading.errors };
  return (
    <div>
      <form
        method="post"
        action={`/api/commissions/${reference}/quote-draft`}
        id={FORM}
        className="desk-form"
        noValidate
        onSubmit={desk.submit}
      >
        <div className="desk-lines">
          <p className="text-muted">
            {reference}, quote revision {standing.revision}
          </p>
          <h1 className="desk-title">{reading.draft.title}</h1>
          <div className="mt-3">
            <FormProblem problem={standing.problem} />
          </div>
          <Differences list={standing.differences} />
          <input type="hidden" name="version" value={standing.version} readOnly />
          <DeskTable
            form={form}
            rows={rows}
            draft={draft}
            errors={errors}
            lines={linesOfRows(reading.draft, desk.values.lines)}
          />
          <DeskWords form={form} initial={fields} errors={errors} currency={draft.currency.studio} />
          <DeskBasis form={form} initial={fields} errors={errors} choices={props.choices} />
        </div>
        <div className="desk-sums">
          <CostSums draft={reading.draft} priced={reading.priced} />
          <hr className="parting-line mt-4" />
          <PriceSums draft={reading.draft} priced={reading.priced} />
          <DeskPrice form={form} initial={fields} errors={errors} priced={reading.priced} />
          <Warnings reading={reading} />
          <div className="mt-6 grid gap-3">
            <Button kind="main" name="act" value="review" wide>
              Send revision {standing.revision}
            </Button>
            <Button kind="quiet" name="act" value="save" wide>
              Save the draft
            </Button>
            {props.ratesChanged && (
              <>
                <p className="hint">Metal, rates or the queue have changed since this draft was begun.</p>
                <Button name="act" value="reprice" wide>
                  Take today’s rates
                </Button>
              </>
            )}
            <p className="hint" role="status">
              {standing.said}
            </p>
          </div>
        </div>
      </form>
      {standing.review && (
        <SendPanel
          reference={reference}
          revision={standing.revision}
          version={standing.version}
          draft={reading.draft}
          priced={reading.priced}
          customer={props.customer}
        />
      )}
    </div>
  );
}

function Differences({ list }: { list: string[] }) {
  if (list.length === 0) return null;
  return (
    <Notice kind="info" title="What you typed differs from what is saved:">
      <ul>
        {list.map((line) => (
          <li key={line}>{line}</li>
        ))}
      </ul>
    </Notice>
  );
}

function Warnings({ reading }: { reading: DeskReading }) {
  const { warnings } = reading.priced;
  if (warnings.length === 0) return null;
  return (
    <ul className="mt-4 grid gap-2 text-note">
      {warnings.map((warning) => (
        <li key={warning.message} className={warning.blocking ? 'font-[650] text-loss-ink' : 'text-molten-ink'}>
          {warning.message}
        </li>
      ))}
    </ul>
  );
}

interface Standing {
  version: number;
  revision: number;
  problem: Problem | null;
  review: boolean;
  said: string;
  differences: string[];
}

/** What the desk shows: its fields, how they read, and the rows of its table. */
interface Seen {
  values: DeskFields;
  reading: DeskReading;
  rows: DeskFields['lines'];
}

function lookAgain(draft: QuoteDraft, choices: DeskChoices, values: DeskFields, before: Seen): Seen {
  const last = values.lines[before.rows.length - 1];
  const isFull = (last?.label ?? '').trim() !== '';
  return {
    values,
    reading: readDesk(draft, values, choices, before.reading),
    rows: isFull ? [...before.rows, BLANK_LINE] : before.rows,
  };
}

/** The desk's state: the form, its reading at each change, and what came of the last press. */
function useDesk(props: QuoteDeskProps) {
  const { draft, choices, fields } = props;
  const [start] = useState(() => typedBefore(FORM, fields));
  const form = useForm<DeskFields>({ defaultValues: start });
  const [seen, setSeen] = useState<Seen>(() => ({
    values: fields,
    reading: readDesk(draft, fields, choices),
    rows: fields.lines,
  }));
  useEffect(() => {
    const look = (values: DeskFields) =>
      setSeen((before) => lookAgain(draft, choices, structuredClone(values), before));
    // What was typed before this script came is read as soon as the first drawing is done.
    queueMicrotask(() => look(form.getValues()));
    return form.subscribe({ formState: { values: true }, callback: ({ values }) => look(values) });
  }, [draft, choices, form]);
  useFollowing(form, seen);
  const [standing, setStanding] = useState<Standing>({
    version: Number(fields.version),
    revision: props.revision,
    problem: props.problem,
    review: props.review,
    said: '',
    differences: props.differences,
  });
  const submit = useSubmit(props, form.getValues, seen.reading.draft, standing, setStanding);
  return { form, ...seen, standing, submit };
}

/** Writes the amounts that follow the masses into their inputs, so that what is shown is what is reckoned. */
function useFollowing(form: UseFormReturn<DeskFields>, { reading, values }: Seen) {
  useEffect(() => {
    if (Object.keys(reading.errors).length > 0) return;
    linesOfRows(reading.draft, values.lines).forEach((line, index) => {
      if (!line || !followsMasses(line)) return;
      const amount = (line.materialsMinor / 100).toFixed(2);
      const name = `lines.${index}.materialsMinor` as const;
      if (form.getValues(name) !== amount) form.setValue(name, amount);
    });
  }, [form, reading, values]);
}

function useSubmit(
  { reference }: QuoteDeskProps,
  read: () => DeskFields,
  typed: QuoteDraft,
  standing: Standing,
  set: (standing: Standing) => void,
) {
  return (event: SyntheticEvent<HTMLFormElement>) => {
    const pressed = (event.nativeEvent as SubmitEvent).submitter;
    const act = pressed instanceof HTMLButtonElement ? pressed.value : 'save';
    if (act === 'reprice') return;
    event.preventDefault();
    set({ ...standing, said: 'Saving…' });
    void save(reference, { ...read(), version: String(standing.version) }, typed, standing, act === 'review').then(
      (after) => {
        set(after);
        if (after.review) setTimeout(() => document.getElementById('send')?.focus());
      },
    );
  };
}

async function save(
  reference: string,
  fields: DeskFields,
  typed: QuoteDraft,
  standing: Standing,
  review: boolean,
): Promise<Standing> {
  const saved = await saveDesk(reference, fields);
  if (saved.ok) {
    const said = 'The draft is saved.';
    return { version: saved.version, revision: saved.revision, problem: null, review, said, differences: [] };
  }
  const now = saved.problem.code === 'stale' ? await savedDesk(reference) : null;
  return {
    ...standing,
    version: now?.version ?? standing.version,
    differences: now ? differencesOf(now.draft, typed) : [],
    problem: saved.problem,
    review: false,
    said: 'Not saved.',
  };
}
