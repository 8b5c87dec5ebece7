import { apiPaths, CHOOSABLE_MAIL_KINDS, MAIL_CHOICES, type ChoosableMail, type MailChoice, type MailChoices } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Pick } from '../../components/Pick.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { useAct } from '../../lib/useAct.js';

const KIND: Record<ChoosableMail, string> = {
  review_request: 'Somebody asks you to review',
  mention: 'Somebody mentions you',
  decision: 'Somebody decides on a line of yours',
  batch_finished: 'Your analyses are finished',
  membership: 'Your role in a programme changes',
  programme: 'A programme you lead is deleted or taken back',
};
const WORD: Record<MailChoice, string> = { at_once: 'at once', daily: 'once a day', never: 'never' };
const OPTIONS = MAIL_CHOICES.map((value) => ({ value, label: WORD[value] }));

export function MailChoicesSection() {
  const choices = useQuery(accountQueries.mailChoices()).data;
  const choose = useAct((choice: { kind: ChoosableMail; choice: MailChoice }) => http.put<MailChoices>(apiPaths.mailChoices, choice), {
    done: 'Saved.',
    changes: [accountQueries.mailChoices().queryKey],
  });
  return (
    <Section
      title="Mail"
      about="Mail about the account itself always comes, at once. What comes once a day leaves at 7:00 UTC, in one message."
    >
      <ul className={sections.rows}>
        {choices &&
          CHOOSABLE_MAIL_KINDS.map((kind) => (
            <li key={kind}>
              <span id={`mail-${kind}`}>{KIND[kind]}</span>
              <Pick
                labelledBy={`mail-${kind}`}
                options={OPTIONS}
                value={choices[kind]}
                onPick={(choice) => choose.mutate({ kind, choice })}
              />
            </li>
          ))}
      </ul>
      {choose.isError && <ErrorNote error={choose.error} />}
    </Section>
  );
}
