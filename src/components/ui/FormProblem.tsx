import type { Problem } from '../../commission/problem';
import { Notice } from './Notice';

export interface FormProblemProps {
  /** A server function's refusal; nothing is drawn without one. */
  problem?: Pick<Problem, 'message' | 'fields'> | null;
  /** Id of the input that a field's name stands for, where the two differ. */
  ids?: Record<string, string>;
}

/** The refusal at the top of a form: its sentence, and a link to each field that has to change. */
export function FormProblem({ problem, ids = {} }: FormProblemProps) {
  if (!problem) return null;
  const fields = Object.entries(problem.fields ?? {});
  const link = (name: string, sentence: string) => <a href={`#${ids[name] ?? name}`}>{sentence}</a>;
  // The one field's sentence is often the whole message: then it is said once.
  const [only] = fields.length === 1 && fields[0]?.[1] === problem.message ? fields : [];
  if (only) return <Notice kind="problem" title={link(...only)} />;
  return (
    <Notice kind="problem" title={problem.message}>
      {fields.length > 0 && (
        <ul className="mt-1">
          {fields.map(([name, sentence]) => (
            <li key={name}>{link(name, sentence)}</li>
          ))}
        </ul>
      )}
    </Notice>
  );
}
