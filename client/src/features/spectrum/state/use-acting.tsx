import { Button } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { useCallback, useState } from 'react';
import type { MemberRole, ReviewAction } from '@foreveil/shared';
import { errorSentence } from '../../../lib/error-sentences.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { readingName } from '../evidence/claim-text.js';
import { actOn, refusal } from '../decisions/act.js';
import type { Decisions } from '../decisions/use-decisions.js';
import { nextUndecided } from '../lines/filters.js';
import type { LineRow } from '../lines/reading.js';
import { DID, spokenAct, spokenRow } from './spoken.js';
import type { Selection } from './use-selection.js';

interface Needs {
  selection: Selection;
  decisions: Decisions;
  /** all rows, and those the table shows, in its order */
  rows: readonly LineRow[];
  shown: readonly LineRow[];
  role: MemberRole | null;
  /** the run on the page is not the newest */
  isOld: boolean;
  display: WavelengthDisplay;
  say: (sentence: string) => void;
}

export interface Acting {
  readonly act: (action: ReviewAction) => void;
  readonly undo: () => void;
  /** puts the decision that met a teammate's over theirs */
  readonly insist: () => void;
  /** goes to the next line still to be decided */
  readonly goOn: (direction: 1 | -1) => void;
  readonly remark: string;
  readonly setRemark: (remark: string) => void;
}

/** Deciding on the chosen line: shown at once, then on to the next undecided one; a remark stays with its line until it was sent. */
export function useActing({ selection, decisions, rows, shown, role, isOld, display, say }: Needs): Acting {
  const [remarks, setRemarks] = useState<Readonly<Record<number, string>>>({});
  const { selected, chosen, select } = selection;
  const at = selected?.feature.index ?? -1;
  const remark = remarks[at] ?? '';
  const setRemark = useCallback((text: string) => setRemarks((old) => ({ ...old, [at]: text })), [at]);

  const goOn = useCallback(
    (direction: 1 | -1) => {
      const next = nextUndecided(shown, selected?.feature.index ?? null, direction);
      if (!next) return say('No other line is left to be decided.');
      select(next.feature.index);
      say(spokenRow(next, rows, display));
    },
    [shown, rows, selected, select, say, display],
  );

  const undo = useCallback(() => {
    decisions.undo(rows).then(
      (index) => {
        if (index === null) return say('There is nothing to undo.');
        select(index);
        say('Undone.');
        notifications.show({ message: 'Undone', autoClose: 3000 });
      },
      (error: unknown) => notifications.show({ title: 'Not undone', message: errorSentence(error) }),
    );
  }, [decisions, rows, select, say]);

  const act = useCallback(
    (action: ReviewAction) => {
      if (!selected || !chosen) return;
      const why = refusal(action, selected.state, role, isOld);
      if (why) {
        say(why);
        notifications.show({ message: why });
        return;
      }
      const { index } = selected.feature;
      const next = action === 'reopen' ? null : nextUndecided(shown, index);
      if (next) select(next.feature.index);
      say(
        `${spokenAct(action, chosen, display)} ${next ? spokenRow(next, rows, display) : action === 'reopen' ? '' : 'No other line is left to be decided.'}`,
      );
      decisions.decide(selected, actOn(selected, action, chosen, remark.trim())).then(
        (agreed) => {
          if (!agreed) return select(index);
          setRemarks(({ [index]: _sent, ...rest }) => rest);
          const message = `${DID[action]} ${action === 'reopen' ? '' : readingName(chosen, display)}`;
          showUndo(message, undo);
        },
        (error: unknown) => {
          select(index);
          say(`Not saved. ${errorSentence(error)}`);
          notifications.show({ title: 'Not saved', message: errorSentence(error) });
        },
      );
    },
    [selected, chosen, role, isOld, shown, rows, display, remark, decisions, select, say, undo],
  );

  const insist = useCallback(() => {
    const index = decisions.conflict?.mine.featureIndex;
    decisions.applyMine().then(
      (agreed) => {
        if (!agreed || index === undefined) return;
        setRemarks(({ [index]: _sent, ...rest }) => rest);
        say('Your decision is saved over theirs.');
      },
      (error: unknown) => notifications.show({ title: 'Not saved', message: errorSentence(error) }),
    );
  }, [decisions, say]);

  return { act, undo, insist, goOn, remark, setRemark };
}

const TOAST = 'decision';

/** One toast at a time: the newest decision, and the way back. */
function showUndo(message: string, undo: () => void) {
  const content = {
    id: TOAST,
    position: 'top-center' as const, // below are the remark and the candidates of the next line
    message: (
      <span style={{ display: 'flex', alignItems: 'center', gap: 12 }}>
        <span style={{ flex: 1 }}>{message}</span>
        <Button
          onClick={() => {
            notifications.hide(TOAST);
            undo();
          }}
        >
          Undo
        </Button>
      </span>
    ),
  };
  notifications.hide(TOAST);
  notifications.show(content);
}
