import { Checkbox } from '@mantine/core';
import type { AnalysisSettings } from '@foreveil/shared';
import { Pick } from '../../../components/Pick.js';
import { NumberBox } from './NumberBox.js';
import type { Steering } from './use-steering.js';
import classes from './steering.module.css';

const USES = [
  { value: 'strengths', label: 'for line strengths' },
  { value: 'strengths_and_continuum', label: 'for strengths and continuum' },
] as const;
const LAWS: readonly { value: AnalysisSettings['extinctionLaw']; label: string }[] = [
  { value: 'ccm89', label: 'Cardelli, Clayton & Mathis 1989' },
  { value: 'odonnell94', label: "O'Donnell 1994" },
  { value: 'fitzpatrick99', label: 'Fitzpatrick 1999' },
];
const FROM_DATA = 'fitted';
const short = (value: number) => String(Number(value.toFixed(3)));

/** Temperature, dust, continuum, and how far and how deep is searched. */
export function PhysicsSection({ steering }: { steering: Steering }) {
  const { draft, set } = steering;
  return (
    <section className={classes.section} aria-label="Temperature, dust and search">
      <h3>Temperature and dust</h3>
      <div className={classes.line}>
        <NumberBox
          label="Temperature"
          unit="K"
          value={draft.temperatureK}
          empty={FROM_DATA}
          onCommit={(temperatureK) => set({ temperatureK })}
        />
        <Pick label="Temperature used" options={USES} value={draft.temperatureUse} onPick={(temperatureUse) => set({ temperatureUse })} />
      </div>
      <div className={classes.line}>
        <NumberBox
          label="A_V"
          unit="mag"
          value={draft.extinctionAv}
          empty={FROM_DATA}
          print={short}
          onCommit={(extinctionAv) => set({ extinctionAv })}
        />
        <NumberBox
          label="or E(B−V)"
          unit="mag"
          value={draft.extinctionAv === null ? null : draft.extinctionAv / draft.extinctionRv}
          empty={FROM_DATA}
          print={short}
          onCommit={(reddening) => set({ extinctionAv: reddening === null ? null : Number((reddening * draft.extinctionRv).toFixed(6)) })}
        />
      </div>
      <div className={classes.line}>
        <NumberBox label="R_V" unit="" value={draft.extinctionRv} onCommit={(value) => value !== null && set({ extinctionRv: value })} />
        <Pick label="Law of extinction" options={LAWS} value={draft.extinctionLaw} onPick={(extinctionLaw) => set({ extinctionLaw })} />
      </div>
      <Checkbox
        size="xs"
        label="Trace the continuum locally; fit no temperature"
        checked={draft.localContinuum}
        onChange={(event) => set({ localContinuum: event.currentTarget.checked })}
      />
      <h3>Search</h3>
      <div className={classes.line}>
        <NumberBox
          label="False features expected"
          unit="in the spectrum"
          value={draft.falseFeatures}
          onCommit={(value) => value !== null && set({ falseFeatures: value })}
        />
        <NumberBox
          label="Velocities within ±"
          unit="km/s"
          value={draft.velocityRangeKmPerS}
          onCommit={(value) => value !== null && set({ velocityRangeKmPerS: Math.abs(value) })}
        />
      </div>
    </section>
  );
}
