import { zodResolver } from '@hookform/resolvers/zod';
import { useEffect, useState } from 'react';
import { useForm, type Resolver, type UseFormRegisterReturn } from 'react-hook-form';
import { z } from 'zod';
import { enquirySchema, missingDeclaration, type Enquiry, type EnquiryInput } from '../../commission/enquiry/enquiry';
import {
  readWords,
  WORD_FIELDS,
  WORD_TICKS,
  type WordField,
  type WordFields,
} from '../../commission/enquiry/enquiry-words';
import type { Problem } from '../../commission/problem';
import { draftNumber, dropDraft, keepDraft, readDraft } from './draft';
import type { EnquiryStart } from './enquiry-start';
import { typedBefore } from './typed-before';

export const ENQUIRY_FORM = 'enquiry-form';

/** The enquiry's inputs and what became of sending them. */
export interface EnquiryPage {
  problem: Problem | null;
  sending: boolean;
  errorOf: (field: WordField | 'uploads') => string | undefined;
  register: (field: WordField) => UseFormRegisterReturn;
  send: () => void;
}

const schemaCheck: Resolver<EnquiryInput, unknown, Enquiry> = zodResolver(enquirySchema);

/** The one schema, and the declaration a blade asks for. */
function resolverFor(bladed: boolean): Resolver<EnquiryInput, unknown, Enquiry> {
  return async (values, context, options) => {
    const checked = await schemaCheck(values, context, options);
    const message = missingDeclaration(bladed, values.adult === true || values.adult === 'yes');
    if (!message) return checked;
    return { values: {}, errors: { ...checked.errors, adult: { type: 'custom', message } } };
  };
}

const answerSchema = z.union([
  z.object({ ok: z.literal(true), to: z.string().startsWith('/') }),
  z.object({
    ok: z.literal(false),
    problem: z.object({
      code: z.string(),
      message: z.string(),
      fields: z.record(z.string(), z.string()).optional(),
    }),
  }),
]);

const UNREACHED: Problem = {
  code: 'unavailable',
  message: 'The studio could not be reached. Everything you typed is still here; send it again in a minute.',
};

/** Posts the enquiry and gives the page it leads to, or why it was not taken. */
async function post(body: unknown): Promise<{ to: string } | { problem: Problem }> {
  const headers = { 'content-type': 'application/json', accept: 'application/json' };
  const response = await fetch('/api/enquiries', { method: 'POST', headers, body: JSON.stringify(body) }).catch(
    () => null,
  );
  const answer = answerSchema.safeParse(await response?.json().catch(() => null));
  if (!answer.success) return { problem: UNREACHED };
  return answer.data.ok ? { to: answer.data.to } : { problem: answer.data.problem as Problem };
}

/** Runs the enquiry's form: checks beside the fields, draft, sending. `uploads` are the numbers of the files sent. */
export function useEnquiry(start: EnquiryStart, uploads: readonly string[]): EnquiryPage {
  const [before] = useState(() => ({ ...start.estimate, ...start.words, ...typedBefore(ENQUIRY_FORM, WORD_TICKS) }));
  const form = useForm<EnquiryInput, unknown, Enquiry>({
    defaultValues: before as Partial<EnquiryInput>,
    resolver: resolverFor(start.bladed),
    mode: 'onTouched',
    shouldFocusError: true,
  });
  const { errors } = form.formState;
  const [problem, setProblem] = useState<Problem | null>(start.problem);
  const [sending, setSending] = useState(false);
  const { getValues, setValue, subscribe } = form;
  useKeptWords(start, { getValues, setValue, subscribe });

  const send = form.handleSubmit(
    async () => {
      setSending(true);
      setProblem(null);
      const answer = await post({ ...getValues(), uploads });
      if ('to' in answer) {
        dropDraft();
        window.location.assign(answer.to);
        return;
      }
      setSending(false);
      setProblem(answer.problem);
    },
    () => setProblem(null),
  );
  return {
    problem,
    sending,
    errorOf: (field) => errors[field]?.message?.toString() ?? problem?.fields?.[field],
    register: (field) => form.register(field),
    send: () => void send(),
  };
}

type Kept = Pick<ReturnType<typeof useForm<EnquiryInput, unknown, Enquiry>>, 'getValues' | 'setValue' | 'subscribe'>;

/** Words typed earlier come back, unless the page brought some of its own; every change is kept a moment later. */
function useKeptWords(start: EnquiryStart, { getValues, setValue, subscribe }: Kept) {
  useEffect(() => {
    const { words } = readDraft();
    if (!start.problem && words) restore(words, setValue);
    setValue('clientId', draftNumber(start.words.clientId ?? ''));
    let timer: ReturnType<typeof setTimeout> | undefined;
    const keep = () => {
      const { website: _trap, consent: _each, adult: _time, ...words } = textOf(getValues());
      keepDraft({ words: words as Record<string, string> });
    };
    const stop = subscribe({
      formState: { values: true },
      callback: () => {
        clearTimeout(timer);
        timer = setTimeout(keep, 300);
      },
    });
    return () => {
      clearTimeout(timer);
      stop();
    };
  }, [start, getValues, setValue, subscribe]);
}

function restore(words: Record<string, string>, setValue: Kept['setValue']) {
  for (const field of WORD_FIELDS) {
    const value = words[field];
    if (field !== 'clientId' && value) setValue(field, value);
  }
}

function textOf(values: Partial<EnquiryInput>): WordFields {
  return readWords(values);
}
