import { TextInput } from '@mantine/core';
import { apiPaths, PURGE_AFTER_DAYS, type Programme } from '@foreveil/shared';
import { useNavigate } from 'react-router-dom';
import { ActForm } from '../../components/ActForm.js';
import { Confirm } from '../../components/Confirm.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { pagePaths } from '../../lib/paths.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { useAct } from '../../lib/useAct.js';

export function ProgrammeSettings({ programme: { id, name, description, version } }: { programme: Programme }) {
  const navigate = useNavigate();
  const list = programmeQueries.list().queryKey;
  const change = useAct((fields: Record<string, string>) => http.patch<Programme>(apiPaths.programme(id), fields, { ifMatch: version }), {
    done: 'Saved.',
    changes: [programmeQueries.within(id), list],
  });
  const remove = useAct(() => http.delete(apiPaths.programme(id), { ifMatch: version }), { changes: [list] });
  return (
    <>
      <Section title="Name and description">
        <ActForm act="Save" busy={change.isPending} error={change.error} onSend={(fields) => change.mutateAsync(fields)}>
          <TextInput label="Name" name="name" defaultValue={name} maxLength={120} required withAsterisk={false} />
          <TextInput label="What it is about, optional" name="description" defaultValue={description} maxLength={4000} />
        </ActForm>
      </Section>
      <Section
        title="Delete the programme"
        about={`Nobody sees it any more. Leads can take it back from the page of programmes for ${PURGE_AFTER_DAYS} days; then it is gone with everything in it.`}
      >
        <div className={sections.form}>
          <Confirm
            label="Delete"
            title={`Delete ${name}?`}
            onConfirm={async () => {
              await remove.mutateAsync();
              await navigate(pagePaths.programmes);
            }}
          >
            Its targets, spectra, analyses and decisions go out of sight of everybody now, and for good after {PURGE_AFTER_DAYS} days.
          </Confirm>
        </div>
      </Section>
    </>
  );
}
