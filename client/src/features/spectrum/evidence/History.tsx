import type { Identification } from '@foreveil/shared';
import { probability } from '../../../lib/number.js';
import { Mark } from '../../../plot/Mark.js';
import type { MarkFamily } from '../../../plot/marks.js';
import { shortTime } from '../format.js';
import classes from './evidence.module.css';

const DID = { propose: 'proposed', accept: 'accepted', reject: 'rejected', reopen: 'put back to proposed' } as const;

interface Props {
  identification: Identification | null;
  family: MarkFamily;
  /** when the analysis ended and what it gave */
  analysedAt: string | null;
  analysisProbability: number;
}

/** Who decided what, when and why, under what the analysis said. */
export function History({ identification, family, analysedAt, analysisProbability }: Props) {
  return (
    <ol className={classes.history} aria-label="History">
      <li>
        <time dateTime={analysedAt ?? undefined}>{analysedAt ? shortTime(analysedAt) : ''}</time>
        <Mark family={family} state="proposed" size={14} />
        <span>Analysis: {probability(analysisProbability)}</span>
      </li>
      {identification?.history.map((event, i) => (
        <li key={`${event.at} ${i}`}>
          <time dateTime={event.at}>{shortTime(event.at)}</time>
          <Mark family={family} state={event.to} size={14} />
          <span>
            {event.by} {DID[event.action]}
            {event.action === 'reopen' ? '' : ` ${event.reading}`}
            {event.remark && (
              <>
                : <q>{event.remark}</q>
              </>
            )}
          </span>
        </li>
      ))}
    </ol>
  );
}
