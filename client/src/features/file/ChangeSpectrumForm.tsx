import { Button, Select, TextInput } from '@mantine/core';
import type { SpectrumDetail, TargetSummary } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { changeSpectrum } from '../../lib/queries/files.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import classes from './file.module.css';

interface Props {
  programmeId: string;
  spectrum: SpectrumDetail;
  targets: readonly TargetSummary[];
}

/** Its name, and the target that it belongs to; the decisions on it go along. */
export function ChangeSpectrumForm({ programmeId, spectrum, targets }: Props) {
  const client = useQueryClient();
  const [label, setLabel] = useState(spectrum.label);
  const [targetId, setTargetId] = useState(spectrum.targetId);
  const renamed = label.trim() !== spectrum.label;
  const moved = targetId !== spectrum.targetId;
  const save = useMutation({
    mutationFn: () => changeSpectrum(programmeId, spectrum, { ...(renamed ? { label } : {}), ...(moved ? { targetId } : {}) }),
    onSettled: () => client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) }),
  });
  return (
    <section className={classes.part}>
      <h2>Name and target</h2>
      <form
        className={classes.inline}
        onSubmit={(event) => {
          event.preventDefault();
          save.mutate();
        }}
      >
        <TextInput label="Called" maxLength={120} value={label} onChange={(event) => setLabel(event.currentTarget.value)} />
        <Select
          label="Of the target"
          searchable
          allowDeselect={false}
          data={targets.map(({ id, name }) => ({ value: id, label: name }))}
          value={targetId}
          onChange={(value) => setTargetId(value ?? spectrum.targetId)}
        />
        <Button type="submit" loading={save.isPending} disabled={!label.trim() || !(renamed || moved)}>
          Save
        </Button>
      </form>
      {save.isError && <ErrorNote error={save.error} />}
    </section>
  );
}
