import { ActionIcon, AppShell } from '@mantine/core';
import { IconSearch } from '@tabler/icons-react';
import { useQuery } from '@tanstack/react-query';
import { useEffect, useRef } from 'react';
import { Link, Outlet, ScrollRestoration, useLocation, useParams } from 'react-router-dom';
import { ApiError } from '../../lib/api-error.js';
import { pagePaths } from '../../lib/paths.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { useProgrammeEvents } from '../../lib/useProgrammeEvents.js';
import { AccountMenu } from './AccountMenu.js';
import { Brand } from './Brand.js';
import { ConnectionNote } from './ConnectionNote.js';
import { Crumbs } from './Crumbs.js';
import { KeysSheet } from './KeysSheet.js';
import { Pending } from './Pending.js';
import classes from './shell.module.css';
import { SignInAgain } from './SignInAgain.js';

/** The bar of 44 px and the page under it. Listens to the programme in the address, so that every page of it stays fresh. */
export function Shell() {
  const { programmeId } = useParams();
  const liveness = useProgrammeEvents(programmeId);
  const isGone = useIsGone(programmeId);
  const main = useFocusOnNewPage();
  return (
    <AppShell header={{ height: 44 }} padding={0}>
      <a href="#content" className={classes.skip}>
        Skip to the page
      </a>
      <AppShell.Header className={classes.bar} withBorder={false}>
        <Brand />
        <Crumbs />
        <div className={classes.right}>
          <FindLines />
          <KeysSheet />
          <AccountMenu />
        </div>
        <Pending />
      </AppShell.Header>
      <AppShell.Main id="content" ref={main} tabIndex={-1} className={classes.page}>
        <ConnectionNote liveness={isGone ? 'live' : liveness} />
        <Outlet />
      </AppShell.Main>
      <SignInAgain />
      <ScrollRestoration />
    </AppShell>
  );
}

/** Whether the page under the bar already says that there is no such programme: its stream is refused, not cut. Asks nothing itself. */
function useIsGone(programmeId = ''): boolean {
  const { error } = useQuery({ ...programmeQueries.detail(programmeId), enabled: false });
  return error instanceof ApiError && error.code === 'not_found';
}

function FindLines() {
  return (
    <ActionIcon component={Link} to={pagePaths.search} aria-label="Find lines" title="Find lines across programmes" size={28}>
      <IconSearch size={16} aria-hidden />
    </ActionIcon>
  );
}

/** After a change of page the focus starts at its top, as after a full load; a screen reader then reads the new title. */
function useFocusOnNewPage() {
  const main = useRef<HTMLElement>(null);
  const { pathname } = useLocation();
  const shown = useRef(pathname);
  useEffect(() => {
    if (shown.current === pathname) return;
    shown.current = pathname;
    main.current?.focus({ preventScroll: true });
  }, [pathname]);
  return main;
}
