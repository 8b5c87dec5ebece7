import { Button } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import { isRouteErrorResponse, Link, useRevalidator, useRouteError } from 'react-router-dom';
import { ApiError } from '../../lib/api-error.js';
import { errorSentence, traceOf } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { Brand } from '../shell/Brand.js';
import { ErrorPage } from './ErrorPage.js';
import { NotFoundPage } from './NotFoundPage.js';
import classes from './pages.module.css';

const isMissingChunk = (error: unknown) =>
  error instanceof TypeError && /dynamically imported module|module script failed|error loading dynamically/i.test(error.message);

const isNothing = (error: unknown) =>
  (isRouteErrorResponse(error) && error.status === 404) || (error instanceof ApiError && error.code === 'not_found');

function titleOf(error: unknown): string {
  if (!(error instanceof ApiError)) return 'Something unexpected happened';
  if (error.code === 'forbidden_role') return 'Not open to your role';
  if (error.code === 'no_connection') return 'No connection';
  return error.status >= 500 ? 'The server could not answer' : 'This page cannot be shown';
}

/** Shown in place of a page whose data, code or drawing failed. `bare`: without the shell around it. */
export function RouteError({ bare = false }: { bare?: boolean }) {
  const error = useRouteError();
  const page = isNothing(error) ? <NotFoundPage /> : <Failed error={error} />;
  if (!bare) return page;
  return (
    <>
      <header className={classes.bar}>
        <Brand />
      </header>
      <main>{page}</main>
    </>
  );
}

function Failed({ error }: { error: unknown }) {
  const client = useQueryClient();
  const { revalidate, state } = useRevalidator();
  const again = async () => {
    await client.resetQueries({ predicate: ({ state: { status } }) => status === 'error' });
    await revalidate();
  };
  const missing = isMissingChunk(error);
  const canRetry = error instanceof ApiError;
  return (
    <ErrorPage
      title={missing ? 'A newer version is there' : titleOf(error)}
      trace={traceOf(error)}
      actions={
        <>
          {canRetry ? (
            <Button variant="filled" loading={state === 'loading'} onClick={() => void again()}>
              Try again
            </Button>
          ) : (
            <Button variant="filled" onClick={() => window.location.reload()}>
              Reload the page
            </Button>
          )}
          <Button component={Link} to={pagePaths.programmes} reloadDocument={!canRetry}>
            Your programmes
          </Button>
        </>
      }
    >
      {missing
        ? 'A part of this page could not be loaded, most likely because Foreveil was updated meanwhile. Reload to get it.'
        : errorSentence(error)}
    </ErrorPage>
  );
}
