import { Button } from '@mantine/core';
import { Dropzone } from '@mantine/dropzone';
import { useRef } from 'react';
import { useNavigate } from 'react-router-dom';
import { handOver } from '../../lib/handed-over.js';
import { pagePaths } from '../../lib/paths.js';
import classes from './programmes.module.css';

interface Props {
  programmeId: string;
  canAdd: boolean;
}

/** A programme without targets: what goes here, and the first step to it. */
export function EmptyProgramme({ programmeId, canAdd }: Props) {
  return (
    <>
      {canAdd ? (
        <FirstFiles programmeId={programmeId} />
      ) : (
        <p className={classes.nothing}>No target yet. An analyst, a reviewer or the lead adds the first spectra; you will see them here.</p>
      )}
      <Ghost />
    </>
  );
}

function FirstFiles({ programmeId }: { programmeId: string }) {
  const navigate = useNavigate();
  const choose = useRef<() => void>(null);
  const take = (files: File[]) => {
    handOver(files);
    void navigate(pagePaths.upload(programmeId));
  };
  return (
    <div className={classes.firstFrame}>
      <Dropzone
        onDrop={take}
        openRef={choose}
        activateOnClick={false}
        tabIndex={-1}
        enablePointerEvents
        className={classes.firstDrop}
        inputProps={{ 'aria-label': 'Spectrum files' }}
      >
        <div className={classes.firstText}>
          <section>
            <h2>Drop reduced spectra here</h2>
            <p>
              FITS or text, one or many. Each is read on this computer first: you see the columns, the medium and the frame before anything
              is sent.
            </p>
            <Button variant="filled" onClick={() => choose.current?.()}>
              Choose files
            </Button>
          </section>
          <section>
            <h2>Then the lines come by themselves</h2>
            <p>
              A continuum with its temperature, every dip and peak, and for each a ranked list of what it can be, with the argument for it.
              Your team accepts or rejects.
            </p>
          </section>
        </div>
      </Dropzone>
    </div>
  );
}

const GHOSTS = ['62%', '80%', '48%'];

/** The table as it will stand. */
const Ghost = () => (
  <div className={classes.ghost} aria-hidden="true">
    <div className={classes.ghostHead}>
      <span>Target</span>
      <span>Its light, the face of its row</span>
      <span>Lines accepted, rejected, open</span>
    </div>
    {GHOSTS.map((width) => (
      <div key={width}>
        <i style={{ width }} />
        <i />
        <i style={{ width }} />
      </div>
    ))}
  </div>
);
