import { Button, Modal } from '@mantine/core';
import { useForm } from '@mantine/form';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { emptyTarget, fromForm, targetRules } from '../../components/target-form.js';
import { TargetFields } from '../../components/TargetFields.js';
import { isApiError } from '../../lib/api-error.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { createTarget, programmeQueries } from '../../lib/queries/programmes.js';
import classes from './programmes.module.css';

interface Props {
  programmeId: string;
  opened: boolean;
  onClose: () => void;
}

export function NewTarget({ programmeId, opened, onClose }: Props) {
  return (
    <Modal opened={opened} onClose={onClose} title="Add a target">
      <NewTargetForm programmeId={programmeId} onCancel={onClose} />
    </Modal>
  );
}

function NewTargetForm({ programmeId, onCancel }: { programmeId: string; onCancel: () => void }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const form = useForm({ mode: 'uncontrolled', initialValues: emptyTarget, validate: targetRules, validateInputOnBlur: ['ra', 'dec'] });
  const create = useMutation({
    mutationFn: () => createTarget(programmeId, fromForm(form.getValues())),
    onSuccess: async ({ id }) => {
      void client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });
      await navigate(pagePaths.target(programmeId, id));
    },
    onError: (error) => {
      if (isApiError(error, 'name_taken')) form.setFieldError('name', errorSentence(error));
    },
  });
  const submit = form.onSubmit(
    () => create.mutate(),
    (errors) => form.getInputNode(Object.keys(errors)[0] ?? '')?.focus(),
  );
  return (
    <form onSubmit={submit} noValidate className={classes.form}>
      <TargetFields form={form} />
      {create.isError && !isApiError(create.error, 'name_taken') && <ErrorNote error={create.error} />}
      <div className={classes.formActs}>
        <Button onClick={onCancel}>Cancel</Button>
        <Button type="submit" variant="filled" loading={create.isPending}>
          Add it
        </Button>
      </div>
    </form>
  );
}
