import { Button, FileInput, Modal, Select, TextInput } from '@mantine/core';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { LineListSummary, Medium, NewLineList } from '@foreveil/shared';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { pagePaths } from '../../lib/paths.js';
import { lineListQueries, sendLineList } from '../../lib/queries/line-lists.js';
import { Preview } from './Preview.js';
import classes from './linelists.module.css';

interface Props {
  programmeId: string;
  lists: readonly LineListSummary[];
  /** adds a version of this list; null: a list of a new name */
  follows?: LineListSummary | null;
  opened: boolean;
  onClose: () => void;
}

export function AddLineList({ opened, onClose, ...rest }: Props) {
  const title = rest.follows ? `New version of ${rest.follows.name}` : 'Add a line list';
  return (
    <Modal opened={opened} onClose={onClose} title={title} size="xl">
      <AddForm {...rest} onClose={onClose} />
    </Modal>
  );
}

interface Wanted {
  name: string;
  version: string;
  citation: string;
  medium: Medium | '';
  baseId: string;
}

/** First looks at the file, then stores it: what will change is shown before anything does. */
function AddForm({ programmeId, lists, follows = null, onClose }: Omit<Props, 'opened'>) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [file, setFile] = useState<File | null>(null);
  const [wanted, setWanted] = useState<Wanted>({
    ...{ name: follows?.name ?? '', version: '', citation: follows?.citation ?? '', medium: '' },
    baseId: follows?.id ?? '',
  });
  const look = useMutation({ mutationFn: (meta: NewLineList) => sendLineList(programmeId, file!, { ...meta, dryRun: true }) });
  const store = useMutation({
    mutationFn: (meta: NewLineList) => sendLineList(programmeId, file!, meta),
    onSuccess: async ({ list }) => {
      await client.invalidateQueries({ queryKey: lineListQueries.all(programmeId) });
      if (list) await navigate(pagePaths.lineList(programmeId, list.id));
      onClose();
    },
  });
  /** whatever was looked at no longer holds once anything changes */
  const change = (part: Partial<Wanted>) => {
    setWanted({ ...wanted, ...part });
    look.reset();
    store.reset();
  };
  const meta = metaOf(wanted, follows);
  const ready = file !== null && meta.name !== '' && meta.version !== '';
  const preview = look.data?.preview;
  return (
    <form
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        if (ready) look.mutate(meta);
      }}
    >
      <FileInput
        label="File: CSV with a row of names, or VOTable"
        placeholder="Choose a file"
        value={file}
        onChange={(chosen) => {
          setFile(chosen);
          change({});
        }}
      />
      <div className={classes.two}>
        <TextInput
          label="Name"
          maxLength={120}
          disabled={follows !== null}
          value={wanted.name}
          onChange={(e) => change({ name: e.currentTarget.value })}
        />
        <TextInput
          label="Version"
          placeholder="2026.2"
          maxLength={40}
          value={wanted.version}
          onChange={(e) => change({ version: e.currentTarget.value })}
        />
      </div>
      <TextInput
        label="Citation of rows that name no source"
        placeholder="Authors, year, journal, or a DOI"
        maxLength={1000}
        value={wanted.citation}
        onChange={(e) => change({ citation: e.currentTarget.value })}
      />
      <div className={classes.two}>
        <Select
          label="Wavelengths, where the file does not say"
          data={[
            { value: '', label: 'as the file says' },
            { value: 'vacuum', label: 'in vacuum' },
            { value: 'air', label: 'in standard air' },
          ]}
          value={wanted.medium}
          onChange={(medium) => change({ medium: (medium ?? '') as Medium | '' })}
        />
        <Select
          label="Start from"
          data={[
            { value: '', label: 'nothing: only the lines of the file' },
            ...lists
              .filter(({ archived }) => !archived)
              .map(({ id, name, version }) => ({ value: id, label: `all lines of ${name} ${version}` })),
          ]}
          value={wanted.baseId}
          onChange={(baseId) => change({ baseId: baseId ?? '' })}
        />
      </div>
      {preview && <Preview preview={preview} />}
      {(look.isError || store.isError) && <ErrorNote error={look.error ?? store.error} />}
      <div className={classes.acts}>
        <Button onClick={onClose}>Cancel</Button>
        <Button type="submit" variant={preview ? 'default' : 'filled'} disabled={!ready} loading={look.isPending}>
          Look at it
        </Button>
        {preview?.problemCount === 0 && (
          <Button variant="filled" loading={store.isPending} onClick={() => store.mutate(meta)}>
            Store this version
          </Button>
        )}
      </div>
    </form>
  );
}

const metaOf = ({ name, version, citation, medium, baseId }: Wanted, follows: LineListSummary | null): NewLineList => ({
  name: name.trim(),
  version: version.trim(),
  ...(citation.trim() ? { citation: citation.trim() } : {}),
  ...(medium ? { medium } : {}),
  ...(baseId ? { baseId } : {}),
  ...(follows ? { previousId: follows.id } : {}),
});
