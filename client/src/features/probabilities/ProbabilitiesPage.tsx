import { calibrationError, RELIABILITY, shareInterval, type FamilyReliability, type Reliability } from '@foreveil/shared';
import { PageHead } from '../../components/PageHead.js';
import { count, percent } from '../../lib/number.js';
import { Mark } from '../../plot/Mark.js';
import { FAMILY_WORD } from '../../plot/marks.js';
import { ReliabilityDiagram } from './ReliabilityDiagram.js';
import classes from './probabilities.module.css';

/** How the probabilities beside the readings were tested, family by family. */
export function ProbabilitiesPage() {
  return <Tests reliability={RELIABILITY} />;
}

export function Tests({ reliability }: { reliability: Reliability }) {
  const { programVersion, lineListVersion, sources, spectra, families, seed } = reliability;
  const all = Object.values(spectra).reduce((a, b) => a + b, 0);
  return (
    <>
      <PageHead
        title="How probabilities are tested"
        sub={`Of readings given 0.9, nine in ten should be right. ${count(all)} simulated spectra with known lines were analysed as yours are, and every reported feature was counted, also those that were nothing.`}
        facts={[
          { label: 'Program', value: programVersion, note: `sources ${sources}` },
          { label: 'Line list', value: lineListVersion },
          { label: 'Spectra', value: count(all), note: `seed ${seed}` },
        ]}
      />
      <div className={classes.page}>
        <p className={classes.words}>
          The simulations have physics of their own: strengths off by 0.2 to 0.25 dex, clouds with several components, rotating and double
          stars, nebulae, air, diffuse bands, lines that no list holds, and in half of them twice the usual gaps, cosmic hits, bent
          wavelengths, leaning profiles and correlated noise. A real spectrum can be odder than any of them. Features of one spectrum stand
          or fall together, so the intervals, which count each feature by itself, are narrower than they should be.
        </p>
        <p className={classes.words}>
          Kinds:{' '}
          {Object.entries(spectra)
            .map(([kind, n]) => `${kind.replaceAll('-', ' ')} ${n}`)
            .join(', ')}
          .
        </p>
        <div className={classes.families}>
          {families.map((family) => (
            <FamilyTest key={family.family} {...family} />
          ))}
        </div>
      </div>
    </>
  );
}

function FamilyTest(reliability: FamilyReliability) {
  const { family, first } = reliability;
  const error = calibrationError(first);
  const id = `tested-${family}`;
  return (
    <section className={classes.family} aria-labelledby={id}>
      <h2 id={id}>
        <Mark family={family} state="proposed" size={18} /> {TITLE[family]}
      </h2>
      <p className={classes.words}>
        {error === null ? 'None in the tests.' : `On average stated and true share differ by ${error.toFixed(3)}.`}
      </p>
      {error !== null && (
        <div className={classes.sides}>
          <ReliabilityDiagram {...reliability} />
          <Numbers {...reliability} />
        </div>
      )}
    </section>
  );
}

const TITLE: Record<FamilyReliability['family'], string> = {
  stellar: 'Lines of stars',
  interstellar: 'Lines of clouds',
  nebular: 'Lines of nebulae',
  telluric: 'Lines of the air',
  unidentified: 'Not a line of the list',
};

function Numbers({ family, first }: FamilyReliability) {
  return (
    <table className={classes.table}>
      <caption className={classes.unseen}>Tests of probabilities, {FAMILY_WORD[family]}</caption>
      <thead>
        <tr>
          <th scope="col">Stated</th>
          <th scope="col">Right</th>
          <th scope="col">of</th>
          <th scope="col">68 % interval</th>
        </tr>
      </thead>
      <tbody>
        {first.map(({ from, to, count: cases, right }) => {
          const { low, high } = shareInterval(right, cases);
          return (
            <tr key={from}>
              <th scope="row">
                {from}–{to}
              </th>
              <td>{cases ? count(right) : ''}</td>
              <td>{count(cases)}</td>
              <td>{cases ? `${percentOf(low)}–${percentOf(high)} %` : ''}</td>
            </tr>
          );
        })}
      </tbody>
    </table>
  );
}

/** One decimal near certainty, none elsewhere. */
const percentOf = (share: number) => (share > 0.95 && share < 1 ? (100 * share).toFixed(1) : percent(share).replace(/\s?%/, ''));
