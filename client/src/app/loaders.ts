import type { QueryClient } from '@tanstack/react-query';
import { redirect, type LoaderFunctionArgs } from 'react-router-dom';
import { isApiError } from '../lib/api-error.js';
import { pagePaths } from '../lib/paths.js';
import { accountQueries } from '../lib/queries/account.js';
import { fileQueries, recipeQueries } from '../lib/queries/files.js';
import { comparisonQueries } from '../lib/queries/comparisons.js';
import { programmeQueries, targetQueries } from '../lib/queries/programmes.js';
import { spectrumQueries } from '../lib/queries/spectra.js';

/** The router decides when a page's data is asked for, beside its code and before it shows; the query cache decides whether at all. */
export function makeLoaders(client: QueryClient) {
  const param = ({ params }: LoaderFunctionArgs, name: string): string => params[name] ?? '';
  return {
    /** lets only the signed-in pass; others come back to where they wanted to go */
    async shell({ request }: LoaderFunctionArgs) {
      try {
        return await client.ensureQueryData(accountQueries.me());
      } catch (error) {
        if (!isApiError(error, 'not_signed_in')) throw error;
        const { pathname, search } = new URL(request.url);
        const next = pathname + search;
        throw redirect(next === '/' ? pagePaths.signIn : `${pagePaths.signIn}?next=${encodeURIComponent(next)}`);
      }
    },
    programmes: async () => {
      await client.ensureQueryData(programmeQueries.list());
      return null;
    },
    programme: async (args: LoaderFunctionArgs) => {
      const p = param(args, 'programmeId');
      await Promise.all([client.ensureQueryData(programmeQueries.detail(p)), client.ensureQueryData(targetQueries.list(p))]);
      return null;
    },
    upload: async (args: LoaderFunctionArgs) => {
      const p = param(args, 'programmeId');
      await Promise.all([
        client.ensureQueryData(programmeQueries.detail(p)),
        client.ensureQueryData(targetQueries.list(p)),
        client.ensureQueryData(recipeQueries.list(p)),
      ]);
      return null;
    },
    recipes: async (args: LoaderFunctionArgs) => {
      const p = param(args, 'programmeId');
      await Promise.all([
        client.ensureQueryData(programmeQueries.detail(p)),
        client.ensureQueryData(recipeQueries.list(p)),
        client.ensureQueryData(fileQueries.removed(p)),
      ]);
      return null;
    },
    file: async (args: LoaderFunctionArgs) => {
      const [p, s] = [param(args, 'programmeId'), param(args, 'spectrumId')];
      await Promise.all([
        client.ensureQueryData(programmeQueries.detail(p)),
        client.ensureQueryData(targetQueries.list(p)),
        client.ensureQueryData(spectrumQueries.detail(p, s)),
        client.ensureQueryData(fileQueries.readings(p, s)),
      ]);
      return null;
    },
    target: async (args: LoaderFunctionArgs) => {
      const [p, t] = [param(args, 'programmeId'), param(args, 'targetId')];
      await Promise.all([client.ensureQueryData(programmeQueries.detail(p)), client.ensureQueryData(targetQueries.detail(p, t))]);
      return null;
    },
    comparisons: async (args: LoaderFunctionArgs) => {
      const p = param(args, 'programmeId');
      await Promise.all([
        client.ensureQueryData(programmeQueries.detail(p)),
        client.ensureQueryData(targetQueries.list(p)),
        client.ensureQueryData(comparisonQueries.list(p)),
      ]);
      return null;
    },
    comparison: async (args: LoaderFunctionArgs) => {
      const [p, c] = [param(args, 'programmeId'), param(args, 'comparisonId')];
      await Promise.all([
        client.ensureQueryData(programmeQueries.detail(p)),
        client.ensureQueryData(targetQueries.list(p)),
        client.ensureQueryData(comparisonQueries.detail(p, c)),
      ]);
      return null;
    },
    spectrum: async (args: LoaderFunctionArgs) => {
      const [p, s] = [param(args, 'programmeId'), param(args, 'spectrumId')];
      // the columns are large: started here, waited for by the page
      void client.prefetchQuery(spectrumQueries.samples(p, s));
      await Promise.all([client.ensureQueryData(programmeQueries.detail(p)), client.ensureQueryData(spectrumQueries.detail(p, s))]);
      return null;
    },
  };
}
