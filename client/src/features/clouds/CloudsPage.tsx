import { roleAllows } from '@foreveil/shared';
import { useMutation, useQueryClient, useSuspenseQueries } from '@tanstack/react-query';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { PageHead } from '../../components/PageHead.js';
import { roleReason } from '../../components/RoleButton.js';
import { counted, signed } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { cloudQueries, createCloud } from '../../lib/queries/clouds.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { CloudForm, FRAME_WORD } from './CloudForm.js';
import classes from './clouds.module.css';

/** Clouds of a programme, and the way to a new one. */
export function CloudsPage() {
  const { programmeId = '' } = useParams();
  const [{ data: programme }, { data: clouds }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), cloudQueries.list(programmeId)],
  });
  const client = useQueryClient();
  const navigate = useNavigate();
  const make = useMutation({
    mutationFn: (fields: Parameters<typeof createCloud>[1]) => createCloud(programmeId, fields),
    onSuccess: (made) => {
      void client.invalidateQueries({ queryKey: cloudQueries.all(programmeId) });
      void navigate(pagePaths.cloud(programmeId, made.id));
    },
  });
  return (
    <>
      <PageHead
        title="Clouds"
        tab={`Clouds · ${programme.name}`}
        sub="Gas between the stars and us: where it moves, and who looks through it"
      />
      <div className={classes.page}>
        {clouds.length ? (
          <ul className={classes.list} aria-label="Clouds of the programme">
            {clouds.map((cloud) => (
              <li key={cloud.id}>
                <Link to={pagePaths.cloud(programmeId, cloud.id)}>{cloud.name}</Link>
                <span>
                  {signed(cloud.fromKmPerS, 1)} to {signed(cloud.toKmPerS, 1)} km/s, {FRAME_WORD[cloud.frame]}
                </span>
                <span>{counted(cloud.sightlineCount, 'sightline')}</span>
              </li>
            ))}
          </ul>
        ) : (
          <p className={classes.note}>
            No cloud yet. Name one by the velocities between which its lines stand, then add the spectra behind it.
          </p>
        )}
        <h2>New cloud</h2>
        {roleAllows(programme.role, 'analyst') ? (
          <CloudForm act="Add cloud" busy={make.isPending} error={make.error} onSend={(fields) => make.mutate(fields)} />
        ) : (
          <p className={classes.note}>To add a cloud: {roleReason(programme.role, 'analyst')}</p>
        )}
      </div>
    </>
  );
}
