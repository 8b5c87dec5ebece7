import { useSuspenseQueries } from '@tanstack/react-query';
import { useDisclosure } from '@mantine/hooks';
import { roleAllows, type Programme, type TargetSummary } from '@foreveil/shared';
import { Link, useParams } from 'react-router-dom';
import { Button } from '@mantine/core';
import { PageHead, type Fact } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { count, counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { EmptyProgramme } from './EmptyProgramme.js';
import { Members } from './Members.js';
import { NewTarget } from './NewTarget.js';
import { TargetTable } from './TargetTable.js';
import { Waits } from './Waits.js';

export function ProgrammePage() {
  const { programmeId = '' } = useParams();
  const [{ data: programme }, { data: targets }] = useSuspenseQueries({
    queries: [programmeQueries.detail(programmeId), targetQueries.list(programmeId)],
  });
  const [adding, { open, close }] = useDisclosure(false);
  const actions = (
    <>
      <Button component={Link} to={pagePaths.comparisons(programmeId)}>
        Comparisons
      </Button>
      <Button component={Link} to={pagePaths.clouds(programmeId)}>
        Clouds
      </Button>
      <Button component={Link} to={pagePaths.lineLists(programmeId)}>
        Line lists
      </Button>
      <RoleButton have={programme.role} need="analyst" onClick={open}>
        Add target
      </RoleButton>
      <RoleButton have={programme.role} need="analyst" variant="filled" to={pagePaths.upload(programmeId)}>
        Add spectra
      </RoleButton>
    </>
  );
  return (
    <>
      <PageHead
        title={programme.name}
        simulated={programme.simulated}
        sub={programme.description || whoLeads(programme)}
        facts={targets.length ? factsOf(programme, targets) : []}
        actions={actions}
      />
      {targets.length ? (
        <>
          <Waits programmeId={programmeId} role={programme.role} targets={targets} />
          <TargetTable programmeId={programmeId} targets={targets} />
        </>
      ) : (
        <EmptyProgramme programmeId={programmeId} canAdd={roleAllows(programme.role, 'analyst')} />
      )}
      <Members programme={programme} />
      <NewTarget programmeId={programmeId} opened={adding} onClose={close} />
    </>
  );
}

function whoLeads({ members, role }: Programme): string {
  const leads = members.filter((member) => member.role === 'lead').map(({ name }) => name);
  return `${role === 'lead' ? 'You lead it' : `Led by ${leads.join(' and ') || 'nobody'}`}; ${counted(members.length, 'member')}`;
}

function factsOf({ accepted, open }: Programme, targets: readonly TargetSummary[]): Fact[] {
  const spectra = targets.reduce((sum, target) => sum + target.spectra.length, 0);
  const rejected = targets.reduce((sum, target) => sum + target.rejected, 0);
  return [
    { label: 'Targets, spectra', value: `${count(targets.length)}, ${count(spectra)}` },
    { label: 'Lines accepted', value: count(accepted) },
    { label: 'Rejected', value: count(rejected) },
    { label: 'Open', value: count(open) },
  ];
}
