import type { ObservingTime, Pointing, Reading, Site } from '@foreveil/shared';
import { useState } from 'react';
import { fixed, parseNumber } from '../../lib/number.js';
import { declination, parseCoordinate, rightAscension } from '../../lib/position.js';
import { Pick } from '../Pick.js';
import { FactRow } from './FactRow.js';
import classes from './reading.module.css';
import type { FieldProps } from './field.js';
import { ValueBox } from './ValueBox.js';
import { howKnown, MARK_WORD, optionsOf, SCALE_WORD, timeWords } from './words.js';

const ISO = /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d{1,9})?)?))?$/;

/** '2031-03-04 05:06' as people type it; null when it is no time. */
export function parseTime(text: string): string | null {
  const [, date, time] = ISO.exec(text.trim().replace(/\s+/g, ' ')) ?? [];
  if (!date || Number.isNaN(Date.parse(`${date}T${time ?? '00:00'}Z`))) return null;
  return time ? `${date}T${time}` : date;
}

export function TimeFact({ reading: { time, instrument, telescope }, correct }: FieldProps) {
  const { value } = time;
  const set = (part: Partial<ObservingTime>) => {
    const next = { iso: value?.iso ?? '', scale: value?.scale ?? 'utc', marks: value?.marks ?? 'start', ...part } as const;
    correct('time', next.iso ? next : undefined);
  };
  const made = [instrument, telescope].filter(Boolean).join(', ');
  return (
    <FactRow label="Observed" how={howKnown(time, (told) => timeWords(told!))}>
      {(id) => (
        <>
          <ValueBox
            labelledBy={id}
            shown={value?.iso.replace('T', ' ') ?? ''}
            placeholder="2031-03-04 05:06:07"
            width="text"
            parse={parseTime}
            wrong="A date, or date and time: 2031-03-04 05:06:07."
            onSettle={(iso) => (iso ? set({ iso }) : correct('time', undefined))}
          />
          {value && (
            <>
              <Pick label="Time scale" options={optionsOf(SCALE_WORD)} value={value.scale} onPick={(scale) => set({ scale })} />
              <Pick label="The time is the" options={optionsOf(MARK_WORD)} value={value.marks} onPick={(marks) => set({ marks })} />
            </>
          )}
          {made && <span className={classes.range}>{made}</span>}
        </>
      )}
    </FactRow>
  );
}

export const ObjectFact = ({ reading: { objectName } }: { reading: Reading }) =>
  objectName.value === null ? null : (
    <FactRow label="Object" how={howKnown(objectName)}>
      {() => <span>{objectName.value}</span>}
    </FactRow>
  );

const numberWithin = (from: number, to: number) => (text: string) => {
  const value = parseNumber(text);
  return value !== null && value >= from && value <= to ? value : null;
};

export const ExposureFact = ({ reading: { exposureS }, correct }: FieldProps) => (
  <FactRow label="Exposure, s" how={howKnown(exposureS, (s) => `${s} s`)}>
    {(id) => (
      <ValueBox
        labelledBy={id}
        shown={exposureS.value === null ? '' : fixed(exposureS.value, 1)}
        placeholder="seconds"
        parse={numberWithin(0, 1e8)}
        wrong="Seconds, 0 or more."
        onSettle={(value) => correct('exposureS', value)}
      />
    )}
  </FactRow>
);

interface SitePart {
  readonly part: keyof Site;
  readonly label: string;
  readonly placeholder: string;
  readonly parse: (text: string) => number | null;
  readonly wrong: string;
  readonly decimals: number;
}
const SITE_PARTS: readonly SitePart[] = [
  {
    ...{ part: 'latitudeDeg', label: 'Latitude, degrees north', placeholder: 'north °' },
    ...{ parse: numberWithin(-90, 90), wrong: 'From −90 to 90.', decimals: 4 },
  },
  {
    ...{ part: 'longitudeDegEast', label: 'Longitude, degrees east', placeholder: 'east °' },
    ...{ parse: numberWithin(-360, 360), wrong: 'From −360 to 360, positive to the east.', decimals: 4 },
  },
  {
    ...{ part: 'heightM', label: 'Height, m', placeholder: 'm' },
    ...{ parse: numberWithin(-500, 100_000), wrong: 'Metres above the sea.', decimals: 0 },
  },
];

/** Three numbers, taken when all are there. */
export function SiteFact({ reading: { site }, correct }: FieldProps) {
  const [draft, setDraft] = useState<Partial<Site>>({});
  const present: Partial<Site> = { ...site.value, ...draft };
  const settle = (part: keyof Site, value: number | undefined) => {
    const next: Partial<Site> = { ...present, [part]: value };
    const { latitudeDeg, longitudeDegEast, heightM } = next;
    const whole = latitudeDeg !== undefined && longitudeDegEast !== undefined && heightM !== undefined;
    setDraft(whole ? {} : { ...draft, [part]: value });
    if (whole) correct('site', { latitudeDeg, longitudeDegEast, heightM });
    else if (SITE_PARTS.every((one) => next[one.part] === undefined)) correct('site', undefined);
  };
  const words = ({ latitudeDeg, longitudeDegEast }: Site) => `${fixed(latitudeDeg, 2)}°, ${fixed(longitudeDegEast, 2)}°`;
  return (
    <FactRow label="Site" how={howKnown(site, (told) => words(told!))}>
      {() =>
        SITE_PARTS.map(({ part, label, placeholder, parse, wrong, decimals }) => (
          <ValueBox
            key={part}
            label={label}
            shown={present[part] === undefined ? '' : fixed(present[part], decimals)}
            placeholder={placeholder}
            parse={parse}
            wrong={wrong}
            onSettle={(value) => settle(part, value)}
          />
        ))
      }
    </FactRow>
  );
}

const within = (value: number | null, from: number, to: number) => (value !== null && value >= from && value <= to ? value : null);

/** Right ascension and declination, taken when both are there. */
export function PointingFact({ reading: { pointing }, correct }: FieldProps) {
  const [draft, setDraft] = useState<Partial<Pointing>>({});
  const present: Partial<Pointing> = { ...pointing.value, ...draft };
  const settle = (part: keyof Pointing, value: number | undefined) => {
    const next: Partial<Pointing> = { ...present, [part]: value };
    const { raDeg, decDeg } = next;
    const whole = raDeg !== undefined && decDeg !== undefined;
    setDraft(whole ? {} : { ...draft, [part]: value });
    if (whole) correct('pointing', { raDeg, decDeg });
    else if (raDeg === undefined && decDeg === undefined) correct('pointing', undefined);
  };
  return (
    <FactRow label="Pointing, ICRS" how={howKnown(pointing, (told) => `${rightAscension(told!.raDeg)} ${declination(told!.decDeg)}`)}>
      {() => (
        <>
          <ValueBox
            label="Right ascension, ICRS"
            shown={present.raDeg === undefined ? '' : rightAscension(present.raDeg)}
            placeholder="21 14 07.31"
            parse={(text) => within(parseCoordinate(text, 'hours'), 0, 359.999999999)}
            wrong="Hours, minutes, seconds, or degrees."
            onSettle={(value) => settle('raDeg', value)}
          />
          <ValueBox
            label="Declination, ICRS"
            shown={present.decDeg === undefined ? '' : declination(present.decDeg)}
            placeholder="+48 12 51.6"
            parse={(text) => within(parseCoordinate(text, 'degrees'), -90, 90)}
            wrong="Degrees, minutes, seconds, or degrees."
            onSettle={(value) => settle('decDeg', value)}
          />
        </>
      )}
    </FactRow>
  );
}
