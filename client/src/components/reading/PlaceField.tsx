import type { PlaceFact as Place, Reading } from '@foreveil/shared';
import { counted } from '../../lib/number.js';
import { Pick } from '../Pick.js';
import { FactRow } from './FactRow.js';
import type { FieldProps } from './field.js';

/** Which part of the file is read, where there is more than one. */
export function PlaceFact({ reading, correct }: FieldProps) {
  const options = placesOf(reading);
  if (options.length < 2) return null;
  const others = options.length - 1;
  return (
    <FactRow label="Part of the file" how={{ words: counted(others, 'more part'), loud: false }}>
      {(id) => <Pick labelledBy={id} options={options} value={reading.place} onPick={(value) => correct('place', value)} />}
    </FactRow>
  );
}

function placesOf({ place, otherPlaces, places }: Reading) {
  const known = places.filter(({ isSpectrum }) => isSpectrum).map(placeOption);
  const plain = [place, ...otherPlaces]
    .filter((name) => !known.some(({ value }) => value === name))
    .map((name) => ({ value: name, label: name }));
  return [...plain, ...known];
}

/** 'HDU 1 SPECTRUM, 4096 rows'. */
export const placeOption = ({ place, rows }: Place) => ({
  value: place,
  label: rows === null ? place : `${place}, ${counted(rows, 'row')}`,
});
