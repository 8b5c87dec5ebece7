import { Button, Loader } from '@mantine/core';
import { C_KM_PER_S, roleAllows, sameCorrections, type MemberRole, type SpectrumDetail } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { ErrorNote } from '../../components/ErrorNote.js';
import { LightStrip } from '../../plot/LightStrip.js';
import { AnswerProblem } from '../../components/reading/AnswerProblem.js';
import { FileFace } from '../../components/reading/FileFace.js';
import reading from '../../components/reading/reading.module.css';
import type { Correct } from '../../components/reading/field.js';
import { ReadingFields } from '../../components/reading/ReadingFields.js';
import { correctionWords, withCorrection } from '../../components/reading/words.js';
import { looksLikeEmission } from '../../lib/emission.js';
import { fixed } from '../../lib/number.js';
import { readAnew } from '../../lib/queries/files.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { spectrumQueries } from '../../lib/queries/spectra.js';
import classes from './file.module.css';
import { useTrial } from './useTrial.js';

interface Props {
  programmeId: string;
  spectrum: SpectrumDetail;
  role: MemberRole;
}

/** The reading with its corrections; a changed one is tried on this computer first, and holds when it is saved. */
export function ReadOtherwise({ programmeId, spectrum, role }: Props) {
  const trial = useTrial(programmeId, spectrum);
  const client = useQueryClient();
  const { corrections, read } = trial;
  const save = useMutation({
    mutationFn: () => readAnew(programmeId, spectrum, { corrections }),
    onSuccess: async (after) => {
      client.setQueryData(spectrumQueries.detail(programmeId, spectrum.id).queryKey, after);
      client.removeQueries({ queryKey: spectrumQueries.samples(programmeId, spectrum.id).queryKey });
      await client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });
    },
    onError: () => client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) }),
  });
  const mayChange = roleAllows(role, 'analyst');
  const changed = !sameCorrections(corrections, spectrum.corrections);
  const correct: Correct = (field, value) => trial.correct(withCorrection(corrections, field, value));
  const shown = read?.ok ? read.reading : spectrum.reading;
  return (
    <section className={classes.band} aria-label="The reading" aria-busy={trial.busy || undefined}>
      <div>{read?.ok ? <FileFace face={read.face} name={spectrum.fileName} /> : <StoredFace spectrum={spectrum} />}</div>
      <fieldset disabled={!mayChange || save.isPending} className={classes.fields}>
        <legend className={classes.unseen}>What was read of {spectrum.fileName}</legend>
        {read && !read.ok ? (
          <div className={reading.read}>
            <dl>
              <AnswerProblem problem={read.problem} corrections={corrections} correct={correct} />
            </dl>
          </div>
        ) : (
          <ReadingFields reading={shown} correct={correct} />
        )}
      </fieldset>
      <div className={classes.say}>
        <h2>{changed ? 'Read it otherwise' : 'Read as shown'}</h2>
        {read && !read.ok && <p role="alert">{read.problem.sentence}</p>}
        {trial.error !== null && <ErrorNote error={trial.error} />}
        {trial.busy && (
          <p>
            <Loader size={12} /> Reading it on this computer.
          </p>
        )}
        {changed && read?.ok && <Effect spectrum={spectrum} fromNm={read.face.fromNm} toNm={read.face.toNm} />}
        {shown.warnings.slice(0, 4).map(({ sentence }, i) => (
          <p key={i}>{sentence}</p>
        ))}
        {!changed && (
          <p>
            {correctionWords(spectrum.corrections).join(', ') || 'Nothing was corrected.'}
            {spectrum.recipe && ` By the recipe ${spectrum.recipe}.`}
          </p>
        )}
        {save.isError && <ErrorNote error={save.error} />}
        {mayChange && changed && (
          <div className={classes.acts}>
            <Button variant="filled" loading={save.isPending} disabled={!read?.ok || trial.busy} onClick={() => save.mutate()}>
              Read anew and analyse
            </Button>
            <Button onClick={() => trial.correct(spectrum.corrections)}>Take back</Button>
          </div>
        )}
      </div>
    </section>
  );
}

/** What saving would do: where the spectrum would lie, how far every velocity would move, and what becomes of the work on it. */
function Effect({ spectrum, fromNm, toNm }: { spectrum: SpectrumDetail; fromNm: number; toNm: number }) {
  const shift = (fromNm / spectrum.fromNm - 1) * C_KM_PER_S;
  const slight = Math.abs(shift) < 3000;
  return (
    <>
      <p>
        {fixed(fromNm, 3)}–{fixed(toNm, 3)} nm in vacuum instead of {fixed(spectrum.fromNm, 3)}–{fixed(spectrum.toNm, 3)} nm
        {slight && Math.abs(shift) > 0.01 ? `: at the blue end every velocity moves by ${fixed(shift, 1)} km/s` : ''}.
      </p>
      <p>The original bytes are read again and a new analysis starts. Decisions go along to where their lines then lie.</p>
    </>
  );
}

function StoredFace({ spectrum: { fromNm, toNm, preview, fileName } }: { spectrum: SpectrumDetail }) {
  if (!preview) return <div className={classes.noCurve}>no preview</div>;
  const { low, high } = preview;
  return (
    <LightStrip
      wavelengthFromNm={fromNm}
      wavelengthToNm={toNm}
      low={low}
      high={high}
      height={26}
      emission={looksLikeEmission(low, high)}
      label={`Light of ${fileName}`}
    />
  );
}
