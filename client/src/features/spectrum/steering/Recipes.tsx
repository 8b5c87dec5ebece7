import { Button, TextInput } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import {
  changedSettings,
  completeSettings,
  roleAllows,
  sameSetting,
  type AnalysisRecipe,
  type AnalysisSettings,
  type MemberRole,
} from '@foreveil/shared';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { Pick } from '../../../components/Pick.js';
import { ErrorNote } from '../../../components/ErrorNote.js';
import { errorSentence } from '../../../lib/error-sentences.js';
import { changeRecipe, createRecipe, deleteRecipe, recipeQueries } from '../../../lib/queries/steering.js';
import type { Steering } from './use-steering.js';
import classes from './steering.module.css';

/** Only what differs from the defaults is kept: a recipe then follows defaults that improve. */
const different = (settings: AnalysisSettings): Partial<AnalysisSettings> =>
  Object.fromEntries(changedSettings(settings).map((key) => [key, settings[key]]));

const failed = (title: string) => (error: unknown) => void notifications.show({ title, message: errorSentence(error) });

/** Settings that the programme keeps under a name: apply one, keep the present ones, change or delete. */
export function Recipes({ steering, programmeId, role }: { steering: Steering; programmeId: string; role: MemberRole | null }) {
  const recipes = useQuery(recipeQueries.list(programmeId));
  const [id, setId] = useState<string | null>(null);
  const chosen = recipes.data?.find((r) => r.id === id) ?? null;
  const mayKeep = role !== null && roleAllows(role, 'analyst');
  if (recipes.error && !recipes.data) return <ErrorNote error={recipes.error} onRetry={() => void recipes.refetch()} />;
  return (
    <section className={classes.section} aria-label="Recipes">
      <h3>Recipes of this programme</h3>
      {recipes.data?.length === 0 && <p className={classes.quiet}>None yet. Keep settings under a name to use them on other spectra.</p>}
      {(recipes.data?.length ?? 0) > 0 && (
        <div className={classes.line}>
          <Pick
            label="Recipe"
            placeholder="Choose a recipe"
            options={recipes.data!.map((r) => ({ value: r.id, label: r.name }))}
            value={chosen?.id ?? null}
            onPick={setId}
          />
          <Button size="compact-xs" disabled={!chosen} onClick={() => chosen && steering.set(completeSettings(chosen.settings))}>
            Apply
          </Button>
          {mayKeep && chosen && (
            <Keeper key={chosen.id} recipe={chosen} steering={steering} programmeId={programmeId} onGone={() => setId(null)} />
          )}
        </div>
      )}
      {mayKeep && <KeepAs steering={steering} programmeId={programmeId} onKept={setId} />}
    </section>
  );
}

interface KeeperProps {
  recipe: AnalysisRecipe;
  steering: Steering;
  programmeId: string;
  onGone: () => void;
}

function Keeper({ recipe, steering, programmeId, onGone }: KeeperProps) {
  const client = useQueryClient();
  const [asks, setAsks] = useState(false);
  const done = () => client.invalidateQueries({ queryKey: recipeQueries.list(programmeId).queryKey });
  const change = useMutation({
    mutationFn: () => changeRecipe(programmeId, recipe.id, recipe.version, { settings: different(steering.draft) }),
    onSuccess: () => void notifications.show({ message: `“${recipe.name}” now holds these settings.` }),
    onError: failed('The recipe was not changed'),
    onSettled: done,
  });
  const remove = useMutation({
    mutationFn: () => deleteRecipe(programmeId, recipe.id, recipe.version),
    onSuccess: onGone,
    onError: failed('The recipe was not deleted'),
    onSettled: done,
  });
  const isSame = sameSetting(completeSettings(recipe.settings), steering.draft);
  if (asks)
    return (
      <span className={classes.line} role="group" aria-label="Confirm">
        <span>Delete “{recipe.name}”? Runs made with it keep their settings.</span>
        <Button size="compact-xs" loading={remove.isPending} onClick={() => remove.mutate()}>
          Delete
        </Button>
        <Button size="compact-xs" onClick={() => setAsks(false)}>
          Keep it
        </Button>
      </span>
    );
  return (
    <>
      <Button
        size="compact-xs"
        disabled={isSame || steering.problems.length > 0}
        loading={change.isPending}
        onClick={() => change.mutate()}
      >
        Put these settings in it
      </Button>
      <Button size="compact-xs" onClick={() => setAsks(true)}>
        Delete …
      </Button>
    </>
  );
}

function KeepAs({ steering, programmeId, onKept }: { steering: Steering; programmeId: string; onKept: (id: string) => void }) {
  const client = useQueryClient();
  const [name, setName] = useState('');
  const create = useMutation({
    mutationFn: () => createRecipe(programmeId, { name: name.trim(), settings: different(steering.draft) }),
    onSuccess: async ({ id }) => {
      setName('');
      await client.invalidateQueries({ queryKey: recipeQueries.list(programmeId).queryKey });
      onKept(id);
    },
  });
  return (
    <form
      className={classes.line}
      onSubmit={(event) => {
        event.preventDefault();
        if (name.trim()) create.mutate();
      }}
    >
      <TextInput
        size="xs"
        aria-label="Name of a new recipe"
        placeholder="Name"
        maxLength={120}
        value={name}
        error={create.error ? errorSentence(create.error) : null}
        onChange={(event) => setName(event.currentTarget.value)}
      />
      <Button type="submit" size="compact-xs" disabled={!name.trim() || steering.problems.length > 0} loading={create.isPending}>
        Keep these settings as a recipe
      </Button>
    </form>
  );
}
