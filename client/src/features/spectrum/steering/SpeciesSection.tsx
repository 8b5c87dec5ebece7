import { Button, TextInput } from '@mantine/core';
import type { Family } from '@foreveil/shared';
import { useState } from 'react';
import { Pick } from '../../../components/Pick.js';
import { FAMILY_WORD } from '../../../plot/marks.js';
import type { Steering } from './use-steering.js';
import classes from './steering.module.css';

const FAMILIES = (['stellar', 'interstellar', 'nebular', 'telluric'] as const).map((value) => ({ value, label: FAMILY_WORD[value] }));

/** 'ca ii , CH+' as the list writes them: 'Ca II', 'CH+'. */
export function parseSpecies(text: string): string[] {
  const words = text.split(/[,;]/).map((word) => word.trim().replace(/\s+/g, ' '));
  return [
    ...new Set(
      words
        .filter(Boolean)
        .map((word) => word.replace(/^([a-z])/, (c) => c.toUpperCase()).replace(/ ([ivx]+)$/i, (stage) => stage.toUpperCase())),
    ),
  ];
}

/** Which species are considered, and where. */
export function SpeciesSection({ steering }: { steering: Steering }) {
  const { draft, set } = steering;
  return (
    <section className={classes.section} aria-label="Species">
      <h3>Species</h3>
      <SpeciesInput
        label="Only these"
        values={draft.onlySpecies}
        empty="all of the list"
        onCommit={(onlySpecies) => set({ onlySpecies })}
      />
      <SpeciesInput
        label="Without"
        values={draft.withoutSpecies}
        empty="none left out"
        onCommit={(withoutSpecies) => set({ withoutSpecies })}
      />
      <Also steering={steering} />
    </section>
  );
}

interface InputProps {
  label: string;
  values: readonly string[];
  empty: string;
  onCommit: (species: string[]) => void;
}

function SpeciesInput({ label, values, empty, onCommit }: InputProps) {
  const [text, setText] = useState<string | null>(null);
  const commit = () => {
    if (text !== null) onCommit(parseSpecies(text));
    setText(null);
  };
  return (
    <TextInput
      size="xs"
      label={`${label}, parted by commas`}
      placeholder={empty}
      value={text ?? values.join(', ')}
      onChange={(event) => setText(event.currentTarget.value)}
      onBlur={commit}
      onKeyDown={(event) => event.key === 'Enter' && commit()}
    />
  );
}

/** A species in a family where it is not usual. */
function Also({ steering }: { steering: Steering }) {
  const [text, setText] = useState('');
  const [family, setFamily] = useState<Family>('interstellar');
  const names = parseSpecies(text);
  const add = () => {
    names.forEach((species) => steering.add('alsoSpecies', { species, family }));
    setText('');
  };
  return (
    <div className={classes.line} role="group" aria-label="A species where it is not usual">
      <TextInput
        size="xs"
        aria-label="Species to consider as well"
        placeholder="also, as in V II"
        value={text}
        onChange={(e) => setText(e.currentTarget.value)}
      />
      <span>in</span>
      <Pick label="Family of the species" options={FAMILIES} value={family} onPick={setFamily} />
      <Button size="compact-xs" disabled={names.length === 0} onClick={add}>
        Consider
      </Button>
    </div>
  );
}
