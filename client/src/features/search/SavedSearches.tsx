import { ActionIcon, Button, Popover, TextInput } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { IconX } from '@tabler/icons-react';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { IdentificationQuery, SavedSearch } from '@foreveil/shared';
import { useState } from 'react';
import { errorSentence } from '../../lib/error-sentences.js';
import { removeSearch, saveSearch, searchQueries, searchText } from '../../lib/queries/search.js';
import classes from './search.module.css';

interface Props {
  query: IdentificationQuery;
  onChoose: (query: IdentificationQuery) => void;
}

/** Searches a person keeps, and the way to keep this one. */
export function SavedSearches({ query, onChoose }: Props) {
  const saved = useQuery(searchQueries.saved()).data ?? [];
  const here = searchText(query);
  return (
    <div className={classes.saved} role="group" aria-label="Kept searches">
      {saved.map((search) => (
        <Kept key={search.id} search={search} current={searchText(search.query) === here} onChoose={() => onChoose(search.query)} />
      ))}
      {here !== '' && <Keep query={query} />}
    </div>
  );
}

function Kept({ search, current, onChoose }: { search: SavedSearch; current: boolean; onChoose: () => void }) {
  const client = useQueryClient();
  const again = () => client.invalidateQueries({ queryKey: searchQueries.saved().queryKey });
  const undo = useMutation({ mutationFn: saveSearch, onSuccess: again });
  const remove = useMutation({
    mutationFn: () => removeSearch(search.id),
    onSuccess: async () => {
      await again();
      const message = (
        <Button size="compact-sm" onClick={() => undo.mutate({ name: search.name, query: search.query })}>
          Keep it again
        </Button>
      );
      notifications.show({ title: `“${search.name}” is no longer kept`, message });
    },
    onError: (error) => notifications.show({ title: 'Still kept', message: errorSentence(error) }),
  });
  return (
    <span className={classes.kept} data-current={current || undefined}>
      <Button size="compact-sm" aria-pressed={current} onClick={onChoose}>
        {search.name}
      </Button>
      <ActionIcon size={24} aria-label={`Keep ${search.name} no longer`} loading={remove.isPending} onClick={() => remove.mutate()}>
        <IconX size={14} aria-hidden />
      </ActionIcon>
    </span>
  );
}

function Keep({ query }: { query: IdentificationQuery }) {
  const client = useQueryClient();
  const [name, setName] = useState('');
  const [opened, setOpened] = useState(false);
  const save = useMutation({
    mutationFn: saveSearch,
    onSuccess: async () => {
      setOpened(false);
      setName('');
      await client.invalidateQueries({ queryKey: searchQueries.saved().queryKey });
    },
  });
  return (
    <Popover opened={opened} onChange={setOpened} trapFocus>
      <Popover.Target>
        <Button size="compact-sm" onClick={() => setOpened((open) => !open)}>
          Keep this search
        </Button>
      </Popover.Target>
      <Popover.Dropdown>
        <form
          className={classes.keep}
          onSubmit={(event) => {
            event.preventDefault();
            if (name.trim()) save.mutate({ name: name.trim(), query });
          }}
        >
          <TextInput
            label="Name"
            maxLength={120}
            data-autofocus
            value={name}
            error={save.isError ? errorSentence(save.error) : undefined}
            onChange={(event) => setName(event.currentTarget.value)}
          />
          <Button type="submit" variant="filled" disabled={!name.trim()} loading={save.isPending}>
            Keep
          </Button>
        </form>
      </Popover.Dropdown>
    </Popover>
  );
}
