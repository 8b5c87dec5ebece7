import { Button } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { apiPaths, type Programme, type StagedProgramme } from '@foreveil/shared';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { ErrorNote } from '../../components/ErrorNote.js';
import { http } from '../../lib/http.js';
import { memberQueries, programmeQueries } from '../../lib/queries/programmes.js';
import { day } from '../../lib/time.js';
import classes from './programmes.module.css';

/** Deleted programmes that their leads can have back; nothing where there are none. */
export function Staged() {
  const staged = useQuery(memberQueries.staged()).data ?? [];
  if (!staged.length) return null;
  return (
    <section className={classes.members}>
      <h2>Deleted</h2>
      <ul>
        {staged.map((programme) => (
          <StagedRow key={programme.id} programme={programme} />
        ))}
      </ul>
    </section>
  );
}

function StagedRow({ programme: { id, name, deletedBy, goneAt } }: { programme: StagedProgramme }) {
  const client = useQueryClient();
  const recover = useMutation({
    mutationFn: () => http.post<Programme>(apiPaths.recoverProgramme(id)),
    onSuccess: async () => {
      notifications.show({ message: `${name} is back, with everything in it.` });
      await client.invalidateQueries({ queryKey: programmeQueries.list().queryKey });
    },
  });
  return (
    <li>
      <span>
        {name}
        <span className={classes.under}>
          deleted by {deletedBy}; gone for good on {day(goneAt)}
        </span>
      </span>
      <Button loading={recover.isPending} onClick={() => recover.mutate()} aria-label={`Take ${name} back`}>
        Take back
      </Button>
      {recover.isError && <ErrorNote error={recover.error} />}
    </li>
  );
}
