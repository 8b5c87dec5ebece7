import { Button, TextInput } from '@mantine/core';
import { DEFAULT_COMPARISON_SETTINGS, roleAllows, type ComparisonDetail, type ComparisonSettings, type MemberRole } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { roleReason } from '../../components/RoleButton.js';
import { pagePaths } from '../../lib/paths.js';
import { comparisonQueries, rerunComparison } from '../../lib/queries/comparisons.js';
import classes from './comparison.module.css';
import { changesOf, draftOf, readField, settingsOf } from './settings-draft.js';

const FIELDS: readonly { name: keyof ComparisonSettings; label: string }[] = [
  { name: 'offsetAKmPerS', label: 'Add to velocities of A, km/s' },
  { name: 'offsetBKmPerS', label: 'Add to velocities of B, km/s' },
  { name: 'extraCloudsKmPerS', label: 'More clouds at, km/s' },
  { name: 'matchKmPerS', label: 'Tried as one within, km/s' },
  { name: 'profileRangeKmPerS', label: 'Profiles to both sides, km/s' },
];

interface Props {
  programmeId: string;
  comparison: ComparisonDetail;
  role: MemberRole;
}

/** What a person may set, what the next run will change, and the run itself. The comparison shown stays at its own address. */
export function SettingsPanel({ programmeId, comparison, role }: Props) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [draft, setDraft] = useState(() => draftOf(comparison.settings));
  const [name, setName] = useState(comparison.name);
  const rerun = useMutation({
    mutationFn: (settings: ComparisonSettings) => rerunComparison(programmeId, comparison.id, settings, name.trim()),
    onSuccess: async (made) => {
      await client.invalidateQueries({ queryKey: comparisonQueries.all(programmeId) });
      void navigate(pagePaths.comparison(programmeId, made.id));
    },
  });
  const settings = settingsOf(draft);
  const renamed = name.trim() !== comparison.name;
  const changes = settings ? [...changesOf(comparison.settings, settings), ...(renamed ? [`It is called ${name.trim()}.`] : [])] : [];
  const busy = comparison.phase === 'QUEUED' || comparison.phase === 'EXECUTING';
  const closed = !roleAllows(role, 'analyst') || busy || comparison.supersededBy !== null;
  return (
    <details className={classes.settings} open={comparison.result?.clouds.length === 0 || undefined}>
      <summary>Settings of this comparison</summary>
      <form
        aria-label="Settings of this comparison"
        onSubmit={(e) => {
          e.preventDefault();
          if (settings && !closed) rerun.mutate(settings);
        }}
      >
        <div className={classes.fields}>
          <TextInput label="Name" value={name} maxLength={200} readOnly={closed} onChange={(e) => setName(e.currentTarget.value)} />
          {FIELDS.map((f) => (
            <TextInput
              key={f.name}
              label={f.label}
              value={draft[f.name]}
              readOnly={closed}
              placeholder={f.name === 'extraCloudsKmPerS' ? '-12.5; 4' : undefined}
              error={readField(f.name, draft[f.name]).wrong}
              onChange={(e) => setDraft({ ...draft, [f.name]: e.currentTarget.value })}
            />
          ))}
        </div>
        <div role="status" className={classes.note}>
          {changes.length > 0 ? (
            <ul>
              {changes.map((c) => (
                <li key={c}>{c}</li>
              ))}
            </ul>
          ) : (
            settings && 'No setting changed: another run takes in newer analyses of the two spectra.'
          )}
        </div>
        {closed ? (
          <p className={classes.note}>{whyClosed(comparison, role)}</p>
        ) : (
          <div className={classes.acts}>
            <Button type="submit" variant="filled" loading={rerun.isPending} disabled={!settings || !name.trim()}>
              Compare with these settings
            </Button>
            <Button onClick={() => (setDraft(draftOf(comparison.settings)), setName(comparison.name))}>Undo changes</Button>
            <Button onClick={() => setDraft(draftOf(DEFAULT_COMPARISON_SETTINGS))}>Defaults</Button>
          </div>
        )}
        {rerun.isError && <ErrorNote error={rerun.error} />}
        <p className={classes.note}>Rulings go over to the new run with their lines; this run stays at its address.</p>
      </form>
    </details>
  );
}

function whyClosed({ supersededBy }: ComparisonDetail, role: MemberRole): string {
  if (!roleAllows(role, 'analyst')) return `To compare with other settings: ${roleReason(role, 'analyst')}`;
  return supersededBy ? 'This was compared again since: change the settings of the newer one.' : 'Wait until this run is done.';
}
