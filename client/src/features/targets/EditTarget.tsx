import { Button, Modal } from '@mantine/core';
import { useForm } from '@mantine/form';
import { notifications } from '@mantine/notifications';
import type { Target } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { fromForm, targetRules, toForm } from '../../components/target-form.js';
import { TargetFields } from '../../components/TargetFields.js';
import { isApiError } from '../../lib/api-error.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { changeTarget, programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { changed, factsOf, mergeFacts, type TargetFacts } from './merge.js';
import { MergeFacts } from './MergeFacts.js';
import classes from './targets.module.css';

interface Props {
  programmeId: string;
  target: Target;
  opened: boolean;
  onClose: () => void;
}

export function EditTarget({ programmeId, target, opened, onClose }: Props) {
  return (
    <Modal opened={opened} onClose={onClose} title={`Facts of ${target.name}`} size="lg">
      <EditForm programmeId={programmeId} target={target} onDone={onClose} />
    </Modal>
  );
}

/** What was seen, what someone saved in the meantime, and what this person wanted. */
interface Collision {
  readonly base: Target;
  readonly theirs: Target;
  readonly mine: TargetFacts;
}

function EditForm({ programmeId, target, onDone }: { programmeId: string; target: Target; onDone: () => void }) {
  // the row as it was when the form opened: later news must not change what is being typed
  const [seen] = useState(target);
  const [collision, setCollision] = useState<Collision | null>(null);
  const client = useQueryClient();
  const form = useForm({ mode: 'uncontrolled', initialValues: toForm(seen), validate: targetRules, validateInputOnBlur: ['ra', 'dec'] });
  const detail = targetQueries.detail(programmeId, target.id);

  const save = useMutation({
    mutationFn: ({ base, wanted }: { base: Target; wanted: TargetFacts }) =>
      changeTarget(programmeId, target.id, base.version, changed(factsOf(base), wanted)),
    onSuccess: async (fresh) => {
      client.setQueryData(detail.queryKey, fresh);
      notifications.show({ message: `Saved the facts of ${fresh.name}.` });
      onDone();
      await client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });
    },
    onError: async (error, { base, wanted }) => {
      if (isApiError(error, 'name_taken')) form.setFieldError('name', errorSentence(error));
      if (!isApiError(error, 'stale_version')) return;
      const theirs = (error.problem?.current as Target | undefined) ?? (await client.fetchQuery({ ...detail, staleTime: 0 }));
      const { settled, conflicts } = mergeFacts(factsOf(base), factsOf(theirs), wanted);
      if (conflicts.length) setCollision({ base, theirs, mine: wanted });
      else save.mutate({ base: theirs, wanted: settled }); // they changed other fields: both changes stand
    },
  });
  const failure = save.error && !isApiError(save.error, 'stale_version') && !isApiError(save.error, 'name_taken') ? save.error : null;

  if (collision) {
    const { base, theirs, mine } = collision;
    const { settled, conflicts } = mergeFacts(factsOf(base), factsOf(theirs), mine);
    return (
      <MergeFacts
        key={theirs.version}
        base={factsOf(base)}
        theirs={factsOf(theirs)}
        mine={mine}
        conflicts={conflicts}
        busy={save.isPending}
        error={save.error && !isApiError(save.error, 'stale_version') ? save.error : null}
        onCancel={onDone}
        onSave={(choices) => save.mutate({ base: theirs, wanted: { ...settled, ...choices } })}
      />
    );
  }
  const submit = form.onSubmit(
    (values) => {
      const wanted = fromForm(values, seen);
      if (Object.keys(changed(factsOf(seen), wanted)).length) save.mutate({ base: seen, wanted });
      else onDone();
    },
    (errors) => form.getInputNode(Object.keys(errors)[0] ?? '')?.focus(),
  );
  return (
    <form onSubmit={submit} noValidate className={classes.form}>
      <TargetFields form={form} />
      {failure && <ErrorNote error={failure} />}
      <div className={classes.formActs}>
        <Button onClick={onDone}>Cancel</Button>
        <Button type="submit" variant="filled" loading={save.isPending}>
          Save
        </Button>
      </div>
    </form>
  );
}
