import type { MemberRole, RemovedSpectrum } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { ErrorNote } from '../../components/ErrorNote.js';
import { RoleButton } from '../../components/RoleButton.js';
import { counted } from '../../lib/number.js';
import { restoreSpectrum } from '../../lib/queries/files.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { day } from '../../lib/time.js';
import classes from './recipes.module.css';

interface Props {
  programmeId: string;
  role: MemberRole;
  spectrum: RemovedSpectrum;
}

export function RemovedRow({ programmeId, role, spectrum: { id, label, targetName, fileName, decisions, removedBy, removedAt } }: Props) {
  const client = useQueryClient();
  const restore = useMutation({
    mutationFn: () => restoreSpectrum(programmeId, id),
    onSuccess: () => client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) }),
  });
  return (
    <li>
      <div>
        <b>
          {label} of {targetName}
        </b>
        <span className={classes.quiet}>
          {fileName}; {decisions ? counted(decisions, 'decision') : 'no decisions'}; removed by {removedBy}, {day(removedAt)}
        </span>
        {restore.isError && <ErrorNote error={restore.error} />}
      </div>
      <div className={classes.acts}>
        <RoleButton have={role} need={decisions ? 'lead' : 'analyst'} onClick={() => restore.mutate()}>
          Put it back
        </RoleButton>
      </div>
    </li>
  );
}
