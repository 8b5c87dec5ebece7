import { Button } from '@mantine/core';
import { useDisclosure } from '@mantine/hooks';
import { useSuspenseQuery } from '@tanstack/react-query';
import type { ProgrammeSummary } from '@foreveil/shared';
import { Link } from 'react-router-dom';
import { PageHead } from '../../components/PageHead.js';
import { Simulated } from '../../components/Simulated.js';
import { Tally, TallyKey } from '../../components/Tally.js';
import { count, counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { NewProgramme } from './NewProgramme.js';
import { Staged } from './Staged.js';
import classes from './programmes.module.css';

export function ProgrammesPage() {
  const programmes = useSuspenseQuery(programmeQueries.list()).data;
  const [creating, { open, close }] = useDisclosure(false);
  const act = (
    <Button variant="filled" onClick={open}>
      New programme
    </Button>
  );
  return (
    <>
      <PageHead
        title="Your programmes"
        sub="A programme is a team’s body of work: its targets, their spectra, and what was agreed on them"
        actions={programmes.length > 0 && act}
      />
      {programmes.length > 0 ? <ProgrammeTable programmes={programmes} /> : <NoProgramme>{act}</NoProgramme>}
      <Staged />
      <NewProgramme opened={creating} onClose={close} />
    </>
  );
}

function ProgrammeTable({ programmes }: { programmes: readonly ProgrammeSummary[] }) {
  return (
    <div className={classes.tableFrame}>
      <table className={classes.table}>
        <caption className={classes.unseen}>Your programmes with your role and how far their reviews are</caption>
        <thead>
          <tr>
            <th scope="col">Programme</th>
            <th scope="col">Your role</th>
            <th scope="col" className={classes.num}>
              Targets
            </th>
            <th scope="col" className={classes.num}>
              Spectra
            </th>
            <th scope="col" className={classes.num}>
              Accepted
            </th>
            <th scope="col" className={classes.num}>
              Open
            </th>
            <th scope="col">Review</th>
          </tr>
        </thead>
        <tbody>
          {programmes.map((programme) => (
            <ProgrammeRow key={programme.id} programme={programme} />
          ))}
        </tbody>
      </table>
      <p className={classes.tableFoot}>
        {counted(programmes.length, 'programme')} <TallyKey />
      </p>
    </div>
  );
}

function ProgrammeRow({
  programme: { id, name, description, simulated, role, targets, spectra, accepted, open },
}: {
  programme: ProgrammeSummary;
}) {
  return (
    <tr>
      <th scope="row">
        <Link to={pagePaths.programme(id)} className={classes.rowLink}>
          {name}
        </Link>{' '}
        {simulated && <Simulated />}
        {description && <span className={classes.under}>{description}</span>}
      </th>
      <td data-label="Your role">{role}</td>
      <td data-label="Targets" className={classes.num}>
        {count(targets)}
      </td>
      <td data-label="Spectra" className={classes.num}>
        {count(spectra)}
      </td>
      <td data-label="Accepted" className={classes.num}>
        {count(accepted)}
      </td>
      <td data-label="Open" className={classes.num}>
        {count(open)}
      </td>
      <td data-label="Review">
        <Tally accepted={accepted} rejected={0} open={open} />
      </td>
    </tr>
  );
}

function NoProgramme({ children }: { children: React.ReactNode }) {
  return (
    <div className={classes.first}>
      <section>
        <h2>Start a programme</h2>
        <p>You will lead it: add spectra, and every dip and peak in them gets its ranked readings, for your team to accept or reject.</p>
        {children}
      </section>
      <section>
        <h2>Or be added to one</h2>
        <p>A colleague who leads a programme can make you a reader, analyst or reviewer of it. It then appears here.</p>
      </section>
    </div>
  );
}
