import { useDisclosure } from '@mantine/hooks';
import { useSuspenseQueries } from '@tanstack/react-query';
import type { LineListSummary } from '@foreveil/shared';
import { Link, useParams } from 'react-router-dom';
import { PageHead } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { count, NO_NUMBER } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { lineListQueries } from '../../lib/queries/line-lists.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { ago } from '../../lib/time.js';
import { useNow } from '../../lib/useNow.js';
import { AddLineList } from './AddLineList.js';
import classes from './linelists.module.css';

/** The lists a programme can analyse with: the shared ones and its own, every version. */
export function LineListsPage() {
  const { programmeId = '' } = useParams();
  const [{ data: programme }, { data: lists }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), lineListQueries.list(programmeId)],
  });
  const [adding, { open, close }] = useDisclosure(false);
  const add = (
    <RoleButton have={programme.role} need="lead" variant="filled" onClick={open}>
      Add a list
    </RoleButton>
  );
  return (
    <>
      <PageHead
        title="Line lists"
        tab={`Line lists · ${programme.name}`}
        sub={`What the analyses of ${programme.name} can name; a version never changes, an edit makes a new one`}
        actions={add}
      />
      <div className={classes.page}>
        <ListTable programmeId={programmeId} lists={lists} />
        {!lists.some(({ own }) => own) && (
          <p className={classes.none}>
            This programme has no list of its own yet. The lead can add one: a CSV table with columns such as species, wavelength_vac [nm],
            log_gf, e_low [cm-1] and source, or a VOTable from a line-access service.
          </p>
        )}
      </div>
      <AddLineList programmeId={programmeId} lists={lists} opened={adding} onClose={close} />
    </>
  );
}

function ListTable({ programmeId, lists }: { programmeId: string; lists: readonly LineListSummary[] }) {
  const now = useNow();
  return (
    <div className={classes.scroll} tabIndex={0} role="region" aria-label="Line lists">
      <table className={classes.table}>
        <caption className={classes.unseen}>Line lists with their versions and sources</caption>
        <thead>
          <tr>
            <th scope="col">List</th>
            <th scope="col">Version</th>
            <th scope="col" className={classes.num}>
              Lines
            </th>
            <th scope="col">Whose</th>
            <th scope="col">Citation</th>
            <th scope="col">Added</th>
          </tr>
        </thead>
        <tbody>
          {lists.map((list) => (
            <tr key={list.id} data-away={list.archived || undefined}>
              <th scope="row">
                <Link to={pagePaths.lineList(programmeId, list.id)}>{list.name}</Link>
              </th>
              <td>
                {list.version}
                {list.archived && <small> put away</small>}
              </td>
              <td className={classes.num}>{count(list.lines)}</td>
              <td>{list.isDefault ? 'shared, used unless another is chosen' : list.own ? 'this programme' : 'shared'}</td>
              <td className={classes.long}>{list.citation || NO_NUMBER}</td>
              <td>
                {ago(list.createdAt, now)}
                {list.createdBy && ` by ${list.createdBy}`}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
