import { Button, TextInput } from '@mantine/core';
import { modals } from '@mantine/modals';
import { signatureWords, type MemberRole, type ReadingRecipe } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { correctionWords } from '../../components/reading/words.js';
import { RoleButton } from '../../components/RoleButton.js';
import { changeRecipe, deleteRecipe, recipeQueries } from '../../lib/queries/files.js';
import { day } from '../../lib/time.js';
import classes from './recipes.module.css';

interface Props {
  programmeId: string;
  role: MemberRole;
  recipe: ReadingRecipe;
}

/** One recipe: what it is for, what it corrects, who made it; renamed in place, deleted after a question. */
export function RecipeRow({ programmeId, role, recipe }: Props) {
  const client = useQueryClient();
  const refresh = () => client.invalidateQueries({ queryKey: recipeQueries.list(programmeId).queryKey });
  const [renaming, setRenaming] = useState(false);
  const rename = useMutation({
    mutationFn: (name: string) => changeRecipe(programmeId, recipe, { name }),
    onSuccess: async () => {
      setRenaming(false);
      await refresh();
    },
  });
  const remove = useMutation({ mutationFn: () => deleteRecipe(programmeId, recipe), onSettled: refresh });
  const ask = () =>
    modals.openConfirmModal({
      title: `Delete the recipe ${recipe.name}?`,
      children: <p>New files of its kind will be read as they stand. Spectra that were read by it stay as they are.</p>,
      labels: { confirm: 'Delete it', cancel: 'Keep it' },
      confirmProps: { variant: 'filled' },
      onConfirm: () => remove.mutate(),
    });
  const error = rename.error ?? remove.error;
  return (
    <li>
      <div>
        {renaming ? (
          <RenameForm
            name={recipe.name}
            busy={rename.isPending}
            onSave={(name) => rename.mutate(name)}
            onCancel={() => setRenaming(false)}
          />
        ) : (
          <b>{recipe.name}</b>
        )}
        <span>{correctionWords(recipe.corrections).join(', ')}</span>
        <span className={classes.quiet}>
          For {signatureWords(recipe.signature)}. By {recipe.createdBy}, {day(recipe.createdAt)}
          {recipe.version > 1 && `; changed by ${recipe.changedBy}, ${day(recipe.changedAt)}`}
        </span>
        {error && <ErrorNote error={error} />}
      </div>
      {!renaming && (
        <div className={classes.acts}>
          <RoleButton have={role} need="analyst" onClick={() => setRenaming(true)}>
            Rename
          </RoleButton>
          <RoleButton have={role} need="analyst" onClick={ask}>
            Delete
          </RoleButton>
        </div>
      )}
    </li>
  );
}

interface RenameProps {
  name: string;
  busy: boolean;
  onSave: (name: string) => void;
  onCancel: () => void;
}

function RenameForm({ name, busy, onSave, onCancel }: RenameProps) {
  const [typed, setTyped] = useState(name);
  return (
    <form
      className={classes.rename}
      onSubmit={(event) => {
        event.preventDefault();
        onSave(typed);
      }}
    >
      <TextInput
        aria-label={`New name of ${name}`}
        autoFocus
        maxLength={120}
        value={typed}
        onChange={(event) => setTyped(event.currentTarget.value)}
      />
      <Button type="submit" variant="filled" loading={busy} disabled={!typed.trim() || typed.trim() === name}>
        Save
      </Button>
      <Button onClick={onCancel}>Cancel</Button>
    </form>
  );
}
