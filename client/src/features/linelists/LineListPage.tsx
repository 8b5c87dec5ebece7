import { Button, TextInput } from '@mantine/core';
import { useDisclosure } from '@mantine/hooks';
import { notifications } from '@mantine/notifications';
import { IconDownload } from '@tabler/icons-react';
import { useInfiniteQuery, useMutation, useQuery, useQueryClient, useSuspenseQueries } from '@tanstack/react-query';
import { apiPaths, type LineListDetail, type LineListSummary, type LineQuery } from '@foreveil/shared';
import { useMemo, useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead, type Fact } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { count, counted, fixed, parseNumber } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { lineListQueries, setArchived } from '../../lib/queries/line-lists.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { AddLineList } from './AddLineList.js';
import { LinesTable } from './LinesTable.js';
import { changesInWords } from './Preview.js';
import classes from './linelists.module.css';

/** One version of a list: what is in it, what it changed, what rests on it. */
export function LineListPage() {
  const { programmeId = '', lineListId = '' } = useParams();
  const [{ data: programme }, { data: list }, { data: lists }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), lineListQueries.detail(programmeId, lineListId), lineListQueries.list(programmeId)],
  });
  const [adding, { open, close }] = useDisclosure(false);
  const archive = useArchiving(programmeId, list);
  const own = list.own && (
    <>
      <RoleButton have={programme.role} need="lead" onClick={archive}>
        {list.archived ? 'Offer it again' : 'Put away'}
      </RoleButton>
      <RoleButton have={programme.role} need="lead" variant="filled" onClick={open}>
        New version
      </RoleButton>
    </>
  );
  return (
    <>
      <PageHead
        title={`${list.name} ${list.version}`}
        tab={`${list.name} ${list.version} · ${programme.name}`}
        sub={list.citation || (list.own ? 'Each row names its source' : 'Shared by all programmes; each row names its source')}
        facts={factsOf(list)}
        actions={
          <>
            <Button
              component="a"
              href={apiPaths.lineListCsv(programmeId, list.id)}
              download
              leftSection={<IconDownload size={14} aria-hidden />}
            >
              CSV
            </Button>
            {own}
          </>
        }
      />
      <div className={classes.page}>
        <p className={classes.back}>
          <Link to={pagePaths.lineLists(programmeId)}>All line lists</Link>
        </p>
        <SincePrevious programmeId={programmeId} list={list} lists={lists} />
        <Lines key={list.id} programmeId={programmeId} list={list} />
      </div>
      <AddLineList programmeId={programmeId} lists={lists} follows={list} opened={adding} onClose={close} />
    </>
  );
}

function factsOf({ lines, species, fromNm, toNm, analyses, decisions }: LineListDetail): Fact[] {
  const decided = decisions.accepted + decisions.rejected + decisions.other;
  return [
    { label: 'Lines', value: count(lines), note: ` of ${counted(species.length, 'species', 'species')}` },
    ...(fromNm === null || toNm === null ? [] : [{ label: 'Range, vacuum nm', value: `${fixed(fromNm, 1)} to ${fixed(toNm, 1)}` }]),
    { label: 'Analyses here', value: count(analyses) },
    { label: 'Decisions that rest on it', value: count(decided), note: decided ? ` ${count(decisions.accepted)} accepted` : '' },
  ];
}

function useArchiving(programmeId: string, list: LineListSummary) {
  const client = useQueryClient();
  const change = useMutation({
    mutationFn: (archived: boolean) => setArchived(programmeId, list.id, archived) as Promise<unknown>,
    onSuccess: async (_, archived) => {
      await client.invalidateQueries({ queryKey: lineListQueries.all(programmeId) });
      const undo = (
        <Button size="compact-sm" onClick={() => change.mutate(!archived)}>
          Undo
        </Button>
      );
      notifications.show({ title: archived ? 'No longer offered for analyses' : 'Offered for analyses again', message: undo });
    },
    onError: (error) => notifications.show({ title: 'Nothing changed', message: errorSentence(error) }),
  });
  return () => change.mutate(!list.archived);
}

function SincePrevious({ programmeId, list, lists }: { programmeId: string; list: LineListDetail; lists: readonly LineListSummary[] }) {
  const previous = lists.find(({ id }) => id === list.previousId);
  const diff = useQuery({ ...lineListQueries.diff(programmeId, list.id, previous?.id ?? ''), enabled: previous !== undefined }).data;
  if (!previous || !diff) return null;
  const { added, changed, removed } = diff;
  return (
    <section className={classes.since} aria-label="What changed">
      <p>
        Since <Link to={pagePaths.lineList(programmeId, previous.id)}>version {previous.version}</Link>: {changesInWords(diff)}
      </p>
      <details>
        <summary>Which lines</summary>
        {added.length > 0 && <LinesTable lines={added} caption="Added" />}
        {changed.length > 0 && <LinesTable lines={changed.map(({ after }) => after)} caption="Changed, as they are now" />}
        {removed.length > 0 && <LinesTable lines={removed} caption="Left out" />}
      </details>
    </section>
  );
}

/** Lines by wavelength, species and lower energy, more as one asks for them. */
function Lines({ programmeId, list }: { programmeId: string; list: LineListDetail }) {
  const [asked, setAsked] = useState({ fromNm: '', toNm: '', species: '', lowerEnergyTo: '' });
  const query = useMemo(() => readQuery(asked), [asked]);
  const lines = useInfiniteQuery({ ...lineListQueries.lines(programmeId, list.id, query), placeholderData: (old) => old });
  const rows = lines.data?.pages.flatMap((page) => page.rows) ?? [];
  const field = (name: keyof typeof asked, label: string, inputMode: 'decimal' | 'text' = 'decimal') => (
    <TextInput
      label={label}
      inputMode={inputMode}
      value={asked[name]}
      onChange={(e) => setAsked({ ...asked, [name]: e.currentTarget.value })}
    />
  );
  return (
    <section aria-label="Lines of the list">
      <div className={classes.tools}>
        {field('fromNm', 'λ from, vacuum nm')}
        {field('toNm', 'λ to, vacuum nm')}
        {field('species', 'Species', 'text')}
        {field('lowerEnergyTo', 'E lower up to, cm⁻¹')}
      </div>
      {lines.isError && <ErrorNote error={lines.error} />}
      <div aria-busy={lines.isPlaceholderData} data-old={lines.isPlaceholderData || undefined} className={classes.rows}>
        {rows.length > 0 ? (
          <LinesTable lines={rows} caption="Lines of the list" />
        ) : (
          !lines.isPending && <p className={classes.none}>No line of the list matches.</p>
        )}
      </div>
      {lines.hasNextPage && (
        <Button className={classes.more} loading={lines.isFetchingNextPage} onClick={() => void lines.fetchNextPage()}>
          Show more
        </Button>
      )}
    </section>
  );
}

/** What is no number yet, because somebody is still typing, does not count. */
function readQuery({ fromNm, toNm, species, lowerEnergyTo }: Record<'fromNm' | 'toNm' | 'species' | 'lowerEnergyTo', string>): LineQuery {
  const number = (name: keyof LineQuery, text: string) => {
    const value = text.trim() ? parseNumber(text) : null;
    return value === null || value < 0 ? {} : { [name]: value };
  };
  return {
    ...number('fromNm', fromNm),
    ...number('toNm', toNm),
    ...number('lowerEnergyTo', lowerEnergyTo),
    ...(species.trim() ? { species: species.trim() } : {}),
  };
}
