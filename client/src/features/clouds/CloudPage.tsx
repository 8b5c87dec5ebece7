import { Button, NativeSelect } from '@mantine/core';
import { roleAllows, type Cloud, type CloudChange, type CloudSightline, type MemberRole } from '@foreveil/shared';
import { useMutation, useSuspenseQueries } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { Confirm } from '../../components/Confirm.js';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { counted, signed } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { addSightline, changeCloud, cloudQueries, deleteCloud, removeSightline } from '../../lib/queries/clouds.js';
import { createComparison } from '../../lib/queries/comparisons.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { useAct } from '../../lib/useAct.js';
import { CloudForm, FRAME_WORD } from './CloudForm.js';
import classes from './clouds.module.css';
import { ColumnTable } from './ColumnTable.js';
import { SkyChart } from './SkyChart.js';

/** A cloud: its sightlines, their columns in one table and on the sky. */
export function CloudPage() {
  const { programmeId = '', cloudId = '' } = useParams();
  const [{ data: programme }, { data: cloud }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), cloudQueries.detail(programmeId, cloudId)],
  });
  const navigate = useNavigate();
  const changes = [cloudQueries.all(programmeId)];
  // the cloud as it was when the form opened: what was typed stays when a teammate changes another field
  const [editing, setEditing] = useState<Cloud | null>(null);
  const edit = useAct((fields: Parameters<typeof changeCloud>[1]) => changeCloud(cloud, fields), { changes });
  const remove = async () => {
    await deleteCloud(cloud);
    void navigate(pagePaths.clouds(programmeId));
  };
  return (
    <>
      <PageHead
        title={cloud.name}
        tab={`${cloud.name} · ${programme.name}`}
        simulated={programme.simulated}
        sub={`${signed(cloud.fromKmPerS, 1)} to ${signed(cloud.toKmPerS, 1)} km/s, ${FRAME_WORD[cloud.frame]}; ${counted(cloud.sightlineCount, 'sightline')}`}
        actions={
          <>
            <RoleButton have={programme.role} need="analyst" onClick={() => setEditing(editing ? null : cloud)}>
              {editing ? 'Close' : 'Edit'}
            </RoleButton>
            {roleAllows(programme.role, 'reviewer') ? (
              <Confirm label="Delete" title={`Delete the cloud ${cloud.name}?`} onConfirm={remove}>
                Its name, range, notes and list of sightlines go. Spectra and comparisons stay. This cannot be taken back.
              </Confirm>
            ) : (
              <RoleButton have={programme.role} need="reviewer">
                Delete
              </RoleButton>
            )}
          </>
        }
      />
      <div className={classes.page}>
        {editing && (
          <CloudForm
            cloud={editing}
            act="Save"
            busy={edit.isPending}
            error={edit.error}
            onSend={(fields) => edit.mutate(changed(editing, fields), { onSuccess: () => setEditing(null) })}
          />
        )}
        {cloud.notes && <p className={classes.notes}>{cloud.notes}</p>}
        <SightlinesOf cloud={cloud} role={programme.role} />
      </div>
    </>
  );
}

/** Only what differs, so that a teammate's change of another field stays. */
const changed = (before: Cloud, fields: CloudChange): CloudChange =>
  Object.fromEntries(Object.entries(fields).filter(([key, value]) => before[key as keyof CloudChange] !== value)) as CloudChange;

function SightlinesOf({ cloud, role }: { cloud: Cloud; role: MemberRole }) {
  const { programmeId, sightlines } = cloud;
  const changes = [cloudQueries.all(programmeId)];
  const [gone, setGone] = useState<CloudSightline | null>(null);
  const add = useAct((spectrumId: string) => addSightline(cloud, spectrumId), { changes });
  const take = useAct((one: CloudSightline) => removeSightline(cloud, one.spectrumId), { changes });
  const may = roleAllows(role, 'analyst');
  const error = add.error ?? take.error;
  return (
    <>
      <h2>Sightlines</h2>
      {sightlines.length ? (
        <div className={classes.both}>
          <div className={classes.wide}>
            <ColumnTable
              cloud={cloud}
              suggestion={(one) => <Suggestion cloud={cloud} role={role} sightline={one} />}
              onRemove={may ? (one) => take.mutate(one, { onSuccess: () => setGone(one) }) : null}
            />
          </div>
          <SkyChart sightlines={sightlines} />
        </div>
      ) : (
        <p className={classes.note}>No sightline yet. Add the spectra of stars behind the cloud.</p>
      )}
      {gone && (
        <p role="status">
          {gone.targetName} is no longer a sightline of this cloud.{' '}
          <Button size="compact-sm" onClick={() => add.mutate(gone.spectrumId, { onSuccess: () => setGone(null) })}>
            Put it back
          </Button>
        </p>
      )}
      {may && <AddSightline cloud={cloud} busy={add.isPending} onAdd={(id) => add.mutate(id)} />}
      {error && <ErrorNote error={error} />}
    </>
  );
}

function AddSightline({ cloud, busy, onAdd }: { cloud: Cloud; busy: boolean; onAdd: (spectrumId: string) => void }) {
  const [{ data: targets }] = useSuspenseQueries({ queries: [targetQueries.list(cloud.programmeId)] });
  const members = new Set(cloud.sightlines.map((s) => s.spectrumId));
  const options = targets.flatMap((t) =>
    t.spectra.filter((s) => !members.has(s.id)).map((s) => ({ value: s.id, label: `${t.name}, ${s.label}` })),
  );
  const [chosen, setChosen] = useState('');
  const value = options.some((o) => o.value === chosen) ? chosen : (options[0]?.value ?? '');
  if (!options.length) return <p className={classes.note}>All spectra of the programme are sightlines of it.</p>;
  return (
    <form
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        onAdd(value);
      }}
    >
      <NativeSelect label="Spectrum" data={options} value={value} onChange={(e) => setChosen(e.currentTarget.value)} />
      <Button type="submit" loading={busy}>
        Add sightline
      </Button>
    </form>
  );
}

/** Which comparison gives the columns, and the button that starts it: it measures at the middle of the range even where no cloud is found. */
function Suggestion({ cloud, role, sightline }: { cloud: Cloud; role: MemberRole; sightline: CloudSightline }) {
  const navigate = useNavigate();
  const { programmeId, sightlines, fromKmPerS, toKmPerS } = cloud;
  const others = sightlines.filter((one) => one.spectrumId !== sightline.spectrumId);
  const partner = others.find((one) => one.measured) ?? others[0];
  const start = useMutation({
    mutationFn: (spectrumB: string) => {
      const settings = { extraCloudsKmPerS: [(fromKmPerS + toKmPerS) / 2] };
      return createComparison(programmeId, { spectrumA: sightline.spectrumId, spectrumB, settings });
    },
    onSuccess: (made) => void navigate(pagePaths.comparison(programmeId, made.id)),
  });
  return (
    <div className={classes.suggestion}>
      <span>No comparison in the frame of the cloud measures it here yet.</span>
      {partner ? (
        <RoleButton have={role} need="analyst" size="compact-sm" onClick={() => start.mutate(partner.spectrumId)}>
          Compare with {partner.targetName}
        </RoleButton>
      ) : (
        <RoleButton have={role} need="analyst" size="compact-sm" to={pagePaths.comparisons(programmeId, sightline.spectrumId)}>
          Compare with another spectrum
        </RoleButton>
      )}
      {start.isError && <ErrorNote error={start.error} />}
    </div>
  );
}
