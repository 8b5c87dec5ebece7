import { Button, Select, TextInput } from '@mantine/core';
import { useForm } from '@mantine/form';
import { REVIEW_STATES, type IdentificationQuery, type ProgrammeSummary } from '@foreveil/shared';
import { EMPTY_FORM, formOf, readForm, type SearchForm } from './search-url.js';
import classes from './search.module.css';

interface Props {
  query: IdentificationQuery;
  programmes: readonly ProgrammeSummary[];
  onSearch: (query: IdentificationQuery) => void;
}

const FAMILIES = ['stellar', 'interstellar', 'nebular', 'telluric'];
const ORDER_WORDS = { wavelength: 'by wavelength', velocity: 'by velocity', width: 'by equivalent width' };
const word = (value: string) => ({ value, label: value });

/** What to look for. Enter searches; what is left empty does not count. */
export function SearchFields({ query, programmes, onSearch }: Props) {
  const form = useForm<SearchForm>({ mode: 'uncontrolled', initialValues: formOf(query) });
  const submit = form.onSubmit((values) => {
    const read = readForm(values);
    if ('query' in read) return onSearch(read.query);
    form.setFieldError(read.field, 'This is no number.');
    form.getInputNode(read.field)?.focus();
  });
  const field = (name: keyof SearchForm) => ({ ...form.getInputProps(name), key: form.key(name) });
  const clear = () => {
    form.setValues(EMPTY_FORM);
    onSearch({});
  };
  return (
    <form onSubmit={submit} noValidate className={classes.fields} aria-label="What to look for" role="search">
      <TextInput label="Species" placeholder="Na I, CH+, unidentified" {...spread(field('species'))} />
      <Select label="Family" data={[{ value: '', label: 'any' }, ...FAMILIES.map(word)]} {...spread(field('family'))} />
      <Select
        label="State"
        data={[{ value: '', label: 'accepted' }, ...REVIEW_STATES.filter((s) => s !== 'accepted').map(word)]}
        {...spread(field('state'))}
      />
      <Select
        label="Programme"
        data={[{ value: '', label: 'all of yours' }, ...programmes.map(({ id, name }) => ({ value: id, label: name }))]}
        {...spread(field('programmeId'))}
      />
      <Range label="Measured λ, vacuum nm" from={field('fromNm')} to={field('toNm')} />
      <Range label="Velocity, km/s" from={field('fromKmPerS')} to={field('toKmPerS')} />
      <Range label="Equivalent width, mÅ" from={field('fromMilliangstrom')} to={field('toMilliangstrom')} />
      <TextInput label="Seen together with" placeholder="K I" description="within 5 km/s, same target" {...spread(field('withSpecies'))} />
      <TextInput
        label="Not together with"
        placeholder="Ca II"
        description="within 5 km/s, same target"
        {...spread(field('withoutSpecies'))}
      />
      <Select
        label="Order"
        data={Object.entries(ORDER_WORDS).map(([value, label]) => ({ value: value === 'wavelength' ? '' : value, label }))}
        {...spread(field('order'))}
      />
      <div className={classes.acts}>
        <Button onClick={clear}>Clear</Button>
        <Button type="submit" variant="filled">
          Search
        </Button>
      </div>
    </form>
  );
}

type Field = Record<string, unknown> & { key: string };

/** React wants the key apart from the other properties. */
const spread = ({ key: _, ...props }: Field) => props;

function Range({ label, from, to }: { label: string; from: Field; to: Field }) {
  return (
    <fieldset className={classes.range}>
      <legend>{label}</legend>
      <TextInput aria-label={`${label}, from`} placeholder="from" inputMode="decimal" {...spread(from)} />
      <TextInput aria-label={`${label}, to`} placeholder="to" inputMode="decimal" {...spread(to)} />
    </fieldset>
  );
}
