import { RELIABILITY, reliabilityOf, type Feature, type Reliability } from '@foreveil/shared';
import { Link } from 'react-router-dom';
import { counted } from '../../../lib/number.js';
import { pagePaths } from '../../../lib/paths.js';
import type { Reading } from '../lines/reading.js';
import classes from './evidence.module.css';

interface Props {
  reading: Reading;
  feature: Feature;
  /** of the analysis that stated the probability */
  programVersion: string;
  reliability?: Reliability;
}

const WHOSE = {
  stellar: 'of stars',
  interstellar: 'of clouds',
  nebular: 'of nebulae',
  telluric: 'of the air',
  unidentified: 'as not listed',
} as const;

const FEW = 10; // cases below which a share says little

/** How readings like this one fared in tests, and the way to all of them. */
export function Tested({ reading, feature, programVersion, reliability = RELIABILITY }: Props) {
  return (
    <p className={classes.tested}>
      {sentenceOf(reading, feature, reliability)}
      {programVersion !== reliability.programVersion &&
        ` Tested was version ${reliability.programVersion} of the program, not ${programVersion}.`}{' '}
      <Link to={pagePaths.probabilities}>How probabilities are tested</Link>
    </p>
  );
}

/** 'Of 240 readings of stars rated 0.95 to 0.99, 235 were right in tests.' */
export function sentenceOf(reading: Reading, { candidates }: Feature, reliability: Reliability): string {
  const isFirst = reading.lineId === null || (candidates[0]?.lineId === reading.lineId && candidates[0].systemId === reading.systemId);
  const bin = reliabilityOf(reliability, reading.family, reading.probability, isFirst);
  const like = `${WHOSE[reading.family]}${isFirst ? '' : ' ranked second or later and'} rated`;
  if (!bin || bin.count === 0) return `The tests hold no readings ${like} like this.`;
  const few = bin.count < FEW ? ' That is too few to lean on.' : '';
  return `Of ${counted(bin.count, 'reading')} ${like} ${bin.from} to ${bin.to}, ${bin.right} were right in tests.${few}`;
}
