import { PURGE_AFTER_DAYS } from '@foreveil/shared';
import { Button } from '@mantine/core';
import { useSuspenseQueries } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { PageHead } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { fileQueries, recipeQueries } from '../../lib/queries/files.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { RecipeRow } from './RecipeRow.js';
import classes from './recipes.module.css';
import { RemovedRow } from './RemovedRow.js';

/** The reading recipes of a programme, and the spectra that were removed from it. */
export function RecipesPage() {
  const { programmeId = '' } = useParams();
  const [{ data: programme }, { data: recipes }, { data: removed }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), recipeQueries.list(programmeId), fileQueries.removed(programmeId)],
  });
  const { role } = programme;
  return (
    <>
      <PageHead
        title="Reading recipes"
        tab={`Reading recipes · ${programme.name}`}
        simulated={programme.simulated}
        sub="How files of one kind are to be read: applied to new files by themselves, always visibly"
        actions={
          <RoleButton have={role} need="analyst" variant="filled" to={pagePaths.upload(programmeId)}>
            Add spectra
          </RoleButton>
        }
      />
      {recipes.length ? (
        <ul className={classes.list} aria-label="Reading recipes">
          {recipes.map((recipe) => (
            <RecipeRow key={`${recipe.id} ${recipe.version}`} {...{ programmeId, role, recipe }} />
          ))}
        </ul>
      ) : (
        <div className={classes.empty}>
          <p>
            No recipe yet. Correct a file on the page that adds spectra, then choose “Save as recipe”: the next files of its kind come
            right.
          </p>
          <Button component={Link} to={pagePaths.upload(programmeId)}>
            Go there
          </Button>
        </div>
      )}
      <section className={classes.removed}>
        <h2>
          Removed spectra <span>{removed.length ? counted(removed.length, 'spectrum', 'spectra') : 'none'}</span>
        </h2>
        {removed.length > 0 && (
          <>
            <p className={classes.quiet}>
              Each can be put back for {PURGE_AFTER_DAYS} days after it was removed; then it is gone for good, with its analyses,
              comparisons and decisions.
            </p>
            <ul className={classes.list} aria-label="Removed spectra">
              {removed.map((spectrum) => (
                <RemovedRow key={spectrum.id} {...{ programmeId, role, spectrum }} />
              ))}
            </ul>
          </>
        )}
      </section>
    </>
  );
}
