import { useId } from 'react';
import { filledPerCent, HOT, metalColour } from './runner-metal';

export interface RunnerStage {
  name: string;
  /** A line or two under the name: what happened, and when. */
  note?: string;
  state: 'done' | 'hot' | 'ahead' | 'skipped';
  /** How far a hot stage has come, 0 to 1. */
  share?: number;
}

export interface RunnerProps {
  stages: readonly RunnerStage[];
  /** What a screen reader calls the list. */
  label?: string;
  /** `row` keeps a few stages across even in a narrow place; names only. */
  layout?: 'auto' | 'row';
  /** The stages explain how a piece comes about; none is this reader's piece, so no state is spoken. */
  explains?: boolean;
}

const SAID = { done: 'done', hot: 'now', ahead: 'to come', skipped: 'left out' } as const;

/** The stages of a piece as gates on a runner, filled with metal up to where the piece is. */
export function Runner({ stages, label = 'Stages of the piece', layout = 'auto', explains = false }: RunnerProps) {
  const id = useId();
  const last = stages.reduce(
    (found, stage, index) => (stage.state === 'done' || stage.state === 'hot' ? index : found),
    -1,
  );
  return (
    <div className="runner-box">
      <ol className={layout === 'row' ? 'runner is-row' : 'runner'} aria-label={label}>
        {stages.map((stage, index) => (
          <li
            key={stage.name}
            className={`is-${stage.state}`}
            aria-current={stage.state === 'hot' && !explains ? 'step' : undefined}
          >
            <Segment stage={stage} id={`${id}${index}`} index={index} last={last} turn="across" />
            {layout === 'auto' && <Segment stage={stage} id={`${id}${index}d`} index={index} last={last} turn="down" />}
            <div className="runner-words">
              <p className="runner-name">
                {stage.name}
                {!explains && <span className="sr-only">, {SAID[stage.state]}</span>}
              </p>
              {stage.note && layout === 'auto' && <p className="runner-note">{stage.note}</p>}
            </div>
          </li>
        ))}
      </ol>
    </div>
  );
}

interface SegmentProps {
  stage: RunnerStage;
  id: string;
  index: number;
  /** Index of the last stage that has metal in it. */
  last: number;
  turn: 'across' | 'down';
}

const GATE = {
  across: { whole: '12,14 28,14 24.5,46 15.5,46', upper: '12,14 28,14 26.3,29 13.7,29' },
  down: { whole: '11,9 11,25 40,21.5 40,12.5', upper: '11,9 11,25 25,23.3 25,10.7' },
} as const;

/** One stage's stretch of the runner with its gate. A skipped stage lets metal past, but its gate stays shut. */
function Segment({ stage, id, index, last, turn }: SegmentProps) {
  const filled = index <= last;
  const hot = stage.state === 'hot';
  const across = turn === 'across';
  const length = hot && index === last ? `${filledPerCent(stage.share)}%` : '100%';
  const end = hot && index === last ? HOT : metalColour((index + 1) / (last + 1));
  return (
    <svg className={`runner-metal runner-${turn}`} aria-hidden="true" focusable="false">
      <defs>
        <linearGradient id={id} x1="0" y1="0" x2={across ? 1 : 0} y2={across ? 0 : 1}>
          <stop offset="0" stopColor={metalColour(index / (last + 1))} />
          <stop offset="1" stopColor={end} />
        </linearGradient>
      </defs>
      <rect className="runner-cold" width={across ? '100%' : 12} height={across ? 15 : '100%'} />
      {stage.state !== 'skipped' && <polygon className="runner-cold" points={GATE[turn].whole} />}
      {filled && (
        <rect
          className={hot ? `runner-fill-${turn}` : undefined}
          width={across ? length : 12}
          height={across ? 15 : length}
          fill={`url(#${id})`}
        />
      )}
      {stage.state === 'done' && <polygon points={GATE[turn].whole} fill={metalColour((index + 0.5) / (last + 1))} />}
      {hot && <polygon points={GATE[turn].upper} fill={HOT} />}
    </svg>
  );
}
