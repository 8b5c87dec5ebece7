import { Button } from '@mantine/core';
import { apiPaths, roleAllows } from '@foreveil/shared';
import { useSuspenseQueries } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { HeaderLines } from '../../components/reading/HeaderLines.js';
import { PageHead } from '../../components/PageHead.js';
import { RoleButton } from '../../components/RoleButton.js';
import { count, counted, fileSize } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { fileQueries } from '../../lib/queries/files.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';
import { spectrumQueries } from '../../lib/queries/spectra.js';
import { ChangeSpectrumForm } from './ChangeSpectrumForm.js';
import classes from './file.module.css';
import { ReadingHistory } from './ReadingHistory.js';
import { ReadOtherwise } from './ReadOtherwise.js';
import { useRemoval } from './useRemoval.js';

/** The file behind a spectrum: what it says, how it was read, and how it could be read otherwise. */
export function FilePage() {
  const { programmeId = '', spectrumId = '' } = useParams();
  const [{ data: programme }, { data: spectrum }, { data: targets }, { data: readings }] = useSuspenseQueries({
    queries: [
      programmeQueries.detail(programmeId),
      spectrumQueries.detail(programmeId, spectrumId),
      targetQueries.list(programmeId),
      fileQueries.readings(programmeId, spectrumId),
    ],
  });
  const removal = useRemoval(programmeId, spectrum);
  const { role } = programme;
  const { reading } = spectrum;
  return (
    <>
      <PageHead
        title={spectrum.fileName}
        tab={`${spectrum.fileName} · ${spectrum.targetName}`}
        simulated={spectrum.simulated}
        sub={
          <>
            The file of <Link to={pagePaths.spectrum(programmeId, spectrumId)}>{spectrum.label}</Link> of {spectrum.targetName}, as it was
            delivered by {spectrum.createdBy}
          </>
        }
        facts={[
          { label: 'Size', value: fileSize(spectrum.sizeBytes) },
          { label: 'Samples', value: count(spectrum.points) },
          { label: 'Read', value: counted(readings.length, 'time') },
        ]}
        actions={
          <>
            <Button component="a" href={apiPaths.original(programmeId, spectrumId)} download>
              Download the file
            </Button>
            <RoleButton have={role} need="analyst" onClick={removal.ask}>
              Remove
            </RoleButton>
          </>
        }
      />
      <div className={classes.page}>
        <ReadOtherwise key={spectrum.version} {...{ programmeId, spectrum, role }} />
        {roleAllows(role, 'analyst') && <ChangeSpectrumForm key={`name ${spectrum.version}`} {...{ programmeId, spectrum, targets }} />}
        <ReadingHistory readings={readings} />
        <section className={classes.part}>
          <h2>What the file says</h2>
          <p className={classes.quiet}>
            {reading.place}. SHA-256 <code>{spectrum.sha256}</code>
          </p>
          <HeaderLines lines={reading.header} open />
        </section>
      </div>
    </>
  );
}
