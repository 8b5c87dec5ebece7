import { Button, NativeSelect, Textarea, TextInput } from '@mantine/core';
import { CLOUD_FRAMES, CLOUD_REACH_KM_PER_S, type CloudFrame, type CloudSummary, type NewCloud } from '@foreveil/shared';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { fixed, parseNumber } from '../../lib/number.js';
import classes from './clouds.module.css';

export const FRAME_WORD: Record<CloudFrame, string> = {
  barycentric: 'barycentric',
  heliocentric: 'heliocentric',
  lsrk: 'local standard of rest, kinematic',
  lsrd: 'local standard of rest, dynamical',
};

interface Props {
  /** what stands in the fields at first */
  cloud?: CloudSummary;
  act: string;
  busy: boolean;
  error: unknown;
  onSend: (fields: NewCloud) => void;
}

const velocity = (text: string): number | null => {
  const value = parseNumber(text);
  return value !== null && Math.abs(value) <= CLOUD_REACH_KM_PER_S ? value : null;
};

/** Name, range and notes of a cloud. A refusal stands below, and nothing typed is lost. */
export function CloudForm({ cloud, act, busy, error, onSend }: Props) {
  const [name, setName] = useState(cloud?.name ?? '');
  const [from, setFrom] = useState(cloud ? String(cloud.fromKmPerS) : '');
  const [to, setTo] = useState(cloud ? String(cloud.toKmPerS) : '');
  const [frame, setFrame] = useState<CloudFrame>(cloud?.frame ?? 'barycentric');
  const [notes, setNotes] = useState(cloud?.notes ?? '');
  const [fromKmPerS, toKmPerS] = [velocity(from), velocity(to)];
  const reach = `A velocity within ±${fixed(CLOUD_REACH_KM_PER_S, 0)} km/s`;
  const upside = fromKmPerS !== null && toKmPerS !== null && fromKmPerS >= toKmPerS;
  const ready = name.trim() !== '' && fromKmPerS !== null && toKmPerS !== null && !upside;
  return (
    <form
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        if (ready) onSend({ name: name.trim(), fromKmPerS, toKmPerS, frame, notes: notes.trim() });
      }}
    >
      <TextInput label="Name" required maxLength={120} value={name} onChange={(e) => setName(e.currentTarget.value)} />
      <TextInput
        label="From, km/s"
        required
        value={from}
        onChange={(e) => setFrom(e.currentTarget.value)}
        error={from && fromKmPerS === null ? reach : undefined}
      />
      <TextInput
        label="To, km/s"
        required
        value={to}
        onChange={(e) => setTo(e.currentTarget.value)}
        error={to && toKmPerS === null ? reach : upside ? 'More than where it begins' : undefined}
      />
      <NativeSelect
        label="Frame"
        value={frame}
        onChange={(e) => setFrame(e.currentTarget.value as CloudFrame)}
        data={CLOUD_FRAMES.map((value) => ({ value, label: FRAME_WORD[value] }))}
      />
      <Textarea label="Notes" autosize minRows={1} maxLength={10_000} value={notes} onChange={(e) => setNotes(e.currentTarget.value)} />
      <Button type="submit" variant="filled" loading={busy} disabled={!ready}>
        {act}
      </Button>
      {error ? <ErrorNote error={error} /> : null}
    </form>
  );
}
