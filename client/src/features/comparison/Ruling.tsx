import { Button, NativeSelect, Textarea } from '@mantine/core';
import { ROLE_FOR, roleAllows, VERDICTS, type MemberRole, type Verdict } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { roleReason } from '../../components/RoleButton.js';
import { comparisonQueries, ruleOnLine } from '../../lib/queries/comparisons.js';
import { day } from '../../lib/time.js';
import classes from './comparison.module.css';
import { lineName, VERDICT_WORD, type JudgedLine } from './verdicts.js';

interface Props {
  programmeId: string;
  comparisonId: string;
  role: MemberRole;
  line: JudgedLine;
}

/** Why a line has its verdict, who ruled on it, and the way to overrule it with a remark. */
export function Ruling({ programmeId, comparisonId, role, line }: Props) {
  return (
    <section aria-label="The chosen line" className={classes.ruling}>
      <h2>{lineName(line)}</h2>
      <p className={classes.note}>
        Computed: {VERDICT_WORD[line.verdict]}. {line.sentence}
      </p>
      {line.ruling?.history.map((h, i) => (
        <p key={i} className={classes.note}>
          {h.by}, {day(h.at)}: {h.verdict ? VERDICT_WORD[h.verdict] : 'ruling taken back'}. {h.remark}
        </p>
      ))}
      {roleAllows(role, ROLE_FOR.accept) ? (
        <RulingForm key={line.key} programmeId={programmeId} comparisonId={comparisonId} line={line} />
      ) : (
        <p className={classes.note}>To overrule it: {roleReason(role, ROLE_FOR.accept)}</p>
      )}
    </section>
  );
}

function RulingForm({ programmeId, comparisonId, line }: Omit<Props, 'role'>) {
  const client = useQueryClient();
  const [verdict, setVerdict] = useState<Verdict>(line.stands);
  const [remark, setRemark] = useState('');
  const rule = useMutation({
    mutationFn: (to: Verdict | null) => ruleOnLine(programmeId, comparisonId, line.key, line.ruling?.version ?? 0, { verdict: to, remark }),
    onSuccess: () => setRemark(''),
    onSettled: () => client.invalidateQueries({ queryKey: comparisonQueries.all(programmeId) }),
  });
  const why = remark.trim() === '';
  return (
    <form
      onSubmit={(e) => {
        e.preventDefault();
        if (!why) rule.mutate(verdict);
      }}
    >
      <NativeSelect
        label="Verdict"
        value={verdict}
        onChange={(e) => setVerdict(e.currentTarget.value as Verdict)}
        data={VERDICTS.map((v) => ({ value: v, label: VERDICT_WORD[v] }))}
      />
      <Textarea label="Why" required maxLength={2000} value={remark} onChange={(e) => setRemark(e.currentTarget.value)} />
      <div className={classes.acts}>
        <Button type="submit" variant="filled" disabled={why} loading={rule.isPending}>
          Overrule
        </Button>
        {line.ruling?.verdict && (
          <Button disabled={why} onClick={() => rule.mutate(null)}>
            Take ruling back
          </Button>
        )}
      </div>
      {rule.isError && <ErrorNote error={rule.error} />}
    </form>
  );
}
