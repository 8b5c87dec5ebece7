import { Select, Textarea, TextInput } from '@mantine/core';
import type { UseFormReturnType } from '@mantine/form';
import { KIND_WORD, KINDS } from '../lib/kinds.js';
import type { TargetForm } from './target-form.js';
import classes from './components.module.css';

const kinds = KINDS.map((value) => ({ value, label: KIND_WORD[value] }));

/** The fields of a target's facts; the form around them saves. */
export function TargetFields({ form }: { form: UseFormReturnType<TargetForm> }) {
  return (
    <>
      <TextInput label="Name" maxLength={120} data-autofocus {...form.getInputProps('name')} key={form.key('name')} />
      <Select label="Kind" data={kinds} {...form.getInputProps('kind')} key={form.key('kind')} />
      <div className={classes.two}>
        <TextInput label="Right ascension, ICRS" placeholder="21 14 07.31" {...form.getInputProps('ra')} key={form.key('ra')} />
        <TextInput label="Declination, ICRS" placeholder="+48 12 51.6" {...form.getInputProps('dec')} key={form.key('dec')} />
      </div>
      <Textarea label="Notes" autosize minRows={2} maxRows={10} maxLength={4000} {...form.getInputProps('notes')} key={form.key('notes')} />
    </>
  );
}
