import { Button, Modal, Textarea, TextInput } from '@mantine/core';
import { useForm } from '@mantine/form';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { isApiError } from '../../lib/api-error.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { createProgramme, programmeQueries } from '../../lib/queries/programmes.js';
import classes from './programmes.module.css';

interface Props {
  opened: boolean;
  onClose: () => void;
}

export function NewProgramme({ opened, onClose }: Props) {
  return (
    <Modal opened={opened} onClose={onClose} title="New programme">
      <NewProgrammeForm onCancel={onClose} />
    </Modal>
  );
}

function NewProgrammeForm({ onCancel }: { onCancel: () => void }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const form = useForm({
    mode: 'uncontrolled',
    initialValues: { name: '', description: '' },
    validate: { name: (value) => (value.trim() ? null : 'Give it a name that your team will recognise.') },
  });
  const create = useMutation({
    mutationFn: createProgramme,
    onSuccess: async ({ id }) => {
      void client.invalidateQueries({ queryKey: programmeQueries.list().queryKey });
      await navigate(pagePaths.programme(id));
    },
    onError: (error) => {
      if (isApiError(error, 'name_taken')) form.setFieldError('name', errorSentence(error));
    },
  });
  const submit = form.onSubmit(
    ({ name, description }) => create.mutate({ name: name.trim(), description: description.trim() }),
    (errors) => form.getInputNode(Object.keys(errors)[0] ?? '')?.focus(),
  );
  return (
    <form onSubmit={submit} noValidate className={classes.form}>
      <TextInput label="Name" maxLength={120} data-autofocus {...form.getInputProps('name')} key={form.key('name')} />
      <Textarea
        label="What it is about, optional"
        autosize
        minRows={2}
        maxRows={8}
        maxLength={4000}
        {...form.getInputProps('description')}
        key={form.key('description')}
      />
      {create.isError && !isApiError(create.error, 'name_taken') && <ErrorNote error={create.error} />}
      <div className={classes.formActs}>
        <Button onClick={onCancel}>Cancel</Button>
        <Button type="submit" variant="filled" loading={create.isPending}>
          Start it
        </Button>
      </div>
    </form>
  );
}
