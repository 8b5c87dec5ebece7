import type { QueryClient } from '@tanstack/react-query';
import type { ComponentType } from 'react';
import { createBrowserRouter, type RouteObject } from 'react-router-dom';
import { makeLoaders } from './loaders.js';
import { FirstLoad } from './pages/FirstLoad.js';
import { NotFoundPage } from './pages/NotFoundPage.js';
import { RouteError } from './pages/RouteError.js';
import { Shell } from './shell/Shell.js';

/** A page for people who are not signed in. */
const bare = (path: string, load: () => Promise<ComponentType>): RouteObject => ({
  path,
  HydrateFallback: FirstLoad,
  errorElement: <RouteError bare />,
  lazy: async () => ({ Component: await load() }),
});

export function makeRoutes(client: QueryClient): RouteObject[] {
  const loaders = makeLoaders(client);
  const pages: RouteObject[] = [
    {
      index: true,
      loader: loaders.programmes,
      lazy: async () => ({ Component: (await import('../features/programmes/ProgrammesPage.js')).ProgrammesPage }),
    },
    {
      path: 'programmes/:programmeId',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/programmes/ProgrammePage.js')).ProgrammePage }),
    },
    {
      path: 'programmes/:programmeId/add',
      loader: loaders.upload,
      lazy: async () => ({ Component: (await import('../features/upload/UploadPage.js')).UploadPage }),
    },
    {
      path: 'programmes/:programmeId/targets/:targetId',
      loader: loaders.target,
      lazy: async () => ({ Component: (await import('../features/targets/TargetPage.js')).TargetPage }),
    },
    {
      path: 'programmes/:programmeId/spectra/:spectrumId',
      loader: loaders.spectrum,
      lazy: async () => ({ Component: (await import('../features/spectrum/SpectrumPage.js')).default }),
    },
    {
      path: 'probabilities',
      lazy: async () => ({ Component: (await import('../features/probabilities/ProbabilitiesPage.js')).ProbabilitiesPage }),
    },
    {
      path: 'programmes/:programmeId/spectra/:spectrumId/file',
      loader: loaders.file,
      lazy: async () => ({ Component: (await import('../features/file/FilePage.js')).FilePage }),
    },
    {
      path: 'programmes/:programmeId/recipes',
      loader: loaders.recipes,
      lazy: async () => ({ Component: (await import('../features/recipes/RecipesPage.js')).RecipesPage }),
    },
    {
      path: 'search',
      lazy: async () => ({ Component: (await import('../features/search/SearchPage.js')).SearchPage }),
    },
    {
      path: 'programmes/:programmeId/line-lists',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/linelists/LineListsPage.js')).LineListsPage }),
    },
    {
      path: 'programmes/:programmeId/line-lists/:lineListId',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/linelists/LineListPage.js')).LineListPage }),
    },
    {
      path: 'account',
      lazy: async () => ({ Component: (await import('../features/account/AccountPage.js')).AccountPage }),
    },
    {
      path: 'admin',
      lazy: async () => ({ Component: (await import('../features/admin/AdminPage.js')).AdminPage }),
    },
    {
      path: 'programmes/:programmeId/members',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/members/MembersPage.js')).MembersPage }),
    },
    {
      path: 'programmes/:programmeId/comparisons',
      loader: loaders.comparisons,
      lazy: async () => ({ Component: (await import('../features/comparison/ComparisonsPage.js')).ComparisonsPage }),
    },
    {
      path: 'programmes/:programmeId/comparisons/:comparisonId',
      loader: loaders.comparison,
      lazy: async () => ({ Component: (await import('../features/comparison/ComparisonPage.js')).ComparisonPage }),
    },
    {
      path: 'programmes/:programmeId/clouds',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/clouds/CloudsPage.js')).CloudsPage }),
    },
    {
      path: 'programmes/:programmeId/clouds/:cloudId',
      loader: loaders.programme,
      lazy: async () => ({ Component: (await import('../features/clouds/CloudPage.js')).CloudPage }),
    },
    { path: '*', element: <NotFoundPage /> },
  ];
  return [
    bare('sign-in', async () => (await import('../features/sign-in/SignInPage.js')).SignInPage),
    bare('forgot-password', async () => (await import('../features/sign-in/ForgotPasswordPage.js')).ForgotPasswordPage),
    bare('reset-password', async () => (await import('../features/sign-in/ResetPasswordPage.js')).ResetPasswordPage),
    bare('join', async () => (await import('../features/sign-in/JoinPage.js')).JoinPage),
    bare('confirm-email', async () => (await import('../features/sign-in/UseLinkPage.js')).UseLinkPage),
    bare('mail-choice', async () => (await import('../features/sign-in/UseLinkPage.js')).UseLinkPage),
    bare('first-administrator', async () => (await import('../features/sign-in/FirstAdministratorPage.js')).FirstAdministratorPage),
    bare('mail', async () => (await import('../features/mail/MailPage.js')).MailPage),
    {
      id: 'shell',
      element: <Shell />,
      loader: loaders.shell,
      // who is signed in does not change with the page
      shouldRevalidate: () => false,
      HydrateFallback: FirstLoad,
      errorElement: <RouteError bare />,
      children: [{ errorElement: <RouteError />, children: pages }],
    },
  ];
}

export const makeRouter = (client: QueryClient) => createBrowserRouter(makeRoutes(client));
