import { Button } from '@mantine/core';
import { IconDownload } from '@tabler/icons-react';
import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import type { IdentificationQuery } from '@foreveil/shared';
import { useMemo } from 'react';
import { useSearchParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead } from '../../components/PageHead.js';
import { counted } from '../../lib/number.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { searchCsvPath, searchQueries, searchText } from '../../lib/queries/search.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import { FoundTable } from './FoundTable.js';
import { SavedSearches } from './SavedSearches.js';
import { SearchFields } from './SearchFields.js';
import { queryOf } from './search-url.js';
import classes from './search.module.css';

/** Identifications of every programme one may read. The search stands in the address, so it can be shared, kept and gone back to. */
export function SearchPage() {
  const [params, setParams] = useSearchParams();
  const query = useMemo(() => queryOf(params), [params]);
  const search = (asked: IdentificationQuery) => setParams(searchText(asked));
  return (
    <>
      <PageHead title="Find lines" sub="What your teams agreed on, across all programmes you are a member of" />
      <div className={classes.page}>
        <SearchFields key={searchText(query)} query={query} programmes={usePlaces()} onSearch={search} />
        <SavedSearches query={query} onChoose={search} />
        <Found query={query} />
      </div>
    </>
  );
}

const usePlaces = () => useQuery(programmeQueries.list()).data ?? [];

function Found({ query }: { query: IdentificationQuery }) {
  const found = useInfiniteQuery(searchQueries.identifications(query));
  const display = useWavelengthDisplay();
  const rows = useMemo(() => found.data?.pages.flatMap((page) => page.rows) ?? [], [found.data]);
  if (found.isError) {
    return (
      <div className={classes.answer}>
        <ErrorNote error={found.error} />
        <Button onClick={() => void found.refetch()}>Try again</Button>
      </div>
    );
  }
  if (found.isPending)
    return (
      <p className={classes.answer} role="status">
        Looking…
      </p>
    );
  if (rows.length === 0) {
    return (
      <p className={classes.answer} role="status">
        {searchText(query) === ''
          ? 'No line is accepted yet in your programmes. Lines appear here as your teams accept them.'
          : 'Nothing found. Widen a range, take out a companion, or choose another state: unless you do, only accepted lines are looked at.'}
      </p>
    );
  }
  return (
    <section aria-label="What was found">
      <div className={classes.count}>
        <p role="status">
          {counted(rows.length, 'line')}
          {found.hasNextPage ? ' so far; there are more' : ''}
        </p>
        <Button component="a" href={searchCsvPath(query)} download leftSection={<IconDownload size={14} aria-hidden />}>
          All of them as CSV
        </Button>
      </div>
      <FoundTable rows={rows} display={display} />
      {found.hasNextPage && (
        <Button className={classes.more} loading={found.isFetchingNextPage} onClick={() => void found.fetchNextPage()}>
          Show more
        </Button>
      )}
    </section>
  );
}
