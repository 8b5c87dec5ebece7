import type { AnalysisSummary } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Pick } from '../../../components/Pick.js';
import { pagePaths } from '../../../lib/paths.js';
import { lineListQueries } from '../../../lib/queries/line-lists.js';
import type { Steering } from './use-steering.js';
import classes from './steering.module.css';

type Used = { readonly [K in 'lineListName' | 'lineListVersion']: AnalysisSummary[K] } | null | undefined;

/** The list the next run is to use: what was chosen, else that of the run on the page where it is still offered, else the default. */
export function useNextList(programmeId: string, used: Used, chosen: string | null) {
  const lists = (useQuery(lineListQueries.list(programmeId)).data ?? []).filter(({ archived }) => !archived);
  const before = lists.find(({ name, version }) => name === used?.lineListName && version === used.lineListVersion);
  const next = lists.find(({ id }) => id === chosen) ?? before ?? lists.find(({ isDefault }) => isDefault);
  return { lists, next };
}

export function ListChoice({ steering, programmeId, used }: { steering: Steering; programmeId: string; used: Used }) {
  const { lists, next } = useNextList(programmeId, used, steering.lineListId);
  return (
    <section className={classes.section} aria-label="Line list">
      <h3>Line list</h3>
      <div className={classes.line}>
        <Pick
          label="Line list of the next run"
          placeholder="Choose a list"
          options={lists.map(({ id, name, version }) => ({ value: id, label: `${name} ${version}` }))}
          value={next?.id ?? null}
          onPick={steering.chooseList}
        />
        <Link to={pagePaths.lineLists(programmeId)}>All line lists</Link>
      </div>
    </section>
  );
}
