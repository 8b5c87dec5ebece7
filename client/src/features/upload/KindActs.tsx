import { Button, Modal, Select, TextInput } from '@mantine/core';
import { useDisclosure } from '@mantine/hooks';
import { notifications } from '@mantine/notifications';
import { signatureWords, transferable, type FileSignature, type ReadingCorrections, type ReadingRecipe } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { correctionWords } from '../../components/reading/words.js';
import { counted } from '../../lib/number.js';
import { changeRecipe, createRecipe, recipeQueries } from '../../lib/queries/files.js';
import classes from './upload.module.css';

interface Props {
  programmeId: string;
  recipes: readonly ReadingRecipe[];
  corrections: ReadingCorrections;
  signature: FileSignature;
  similar: number;
  onCorrectSimilar: () => void;
}

/** The corrections of one file, for the others of its kind: those on the page now, and those that will come. */
export function KindActs({ similar, onCorrectSimilar, ...recipe }: Props) {
  const [naming, { open, close }] = useDisclosure(false);
  const general = transferable(recipe.corrections);
  if (!Object.keys(general).length) return null;
  return (
    <>
      {similar > 0 && (
        <Button onClick={onCorrectSimilar} title={`${signatureWords(recipe.signature)}: ${correctionWords(general).join(', ')}`}>
          Apply to {similar === 1 ? 'the similar file' : `all ${counted(similar, 'similar file')}`}
        </Button>
      )}
      <Button onClick={open}>Save as recipe</Button>
      <Modal opened={naming} onClose={close} title="Save as a reading recipe">
        <RecipeForm {...recipe} corrections={general} onDone={close} />
      </Modal>
    </>
  );
}

const NEW = '';

function RecipeForm({
  programmeId,
  recipes,
  corrections,
  signature,
  onDone,
}: Omit<Props, 'similar' | 'onCorrectSimilar'> & { onDone: () => void }) {
  const client = useQueryClient();
  const [name, setName] = useState('');
  const [replaced, setReplaced] = useState(NEW);
  const save = useMutation({
    mutationFn: () => {
      const old = recipes.find(({ id }) => id === replaced);
      return old ? changeRecipe(programmeId, old, { corrections, signature }) : createRecipe(programmeId, { name, corrections, signature });
    },
    onSuccess: async (recipe) => {
      await client.invalidateQueries({ queryKey: recipeQueries.list(programmeId).queryKey });
      notifications.show({ title: 'Recipe saved', message: `${recipe.name} is applied to files of this kind from now on.` });
      onDone();
    },
    onError: () => client.invalidateQueries({ queryKey: recipeQueries.list(programmeId).queryKey }),
  });
  return (
    <form
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        save.mutate();
      }}
    >
      <p>
        For {signatureWords(signature)}: {correctionWords(corrections).join(', ')}. What belongs to one exposure, its time and pointing, is
        not part of it.
      </p>
      {recipes.length > 0 && (
        <Select
          label="Save as"
          data={[
            { value: NEW, label: 'a new recipe' },
            ...recipes.map(({ id, name: old }) => ({ value: id, label: `in place of ${old}` })),
          ]}
          value={replaced}
          allowDeselect={false}
          onChange={(value) => setReplaced(value ?? NEW)}
        />
      )}
      {replaced === NEW && (
        <TextInput
          label="Name"
          required
          maxLength={120}
          data-autofocus
          value={name}
          onChange={(event) => setName(event.currentTarget.value)}
        />
      )}
      {save.isError && <ErrorNote error={save.error} />}
      <div className={classes.acts}>
        <Button onClick={onDone}>Cancel</Button>
        <Button type="submit" variant="filled" loading={save.isPending} disabled={replaced === NEW && !name.trim()}>
          {replaced === NEW ? 'Save it' : 'Replace it'}
        </Button>
      </div>
    </form>
  );
}
