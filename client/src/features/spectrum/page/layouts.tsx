import { Splitter } from '@mantine/core';
import { useRef, useState, type ReactNode } from 'react';
import classes from './spectrum.module.css';

interface Layout {
  curve: ReactNode;
  lines: ReactNode;
  evidence: ReactNode;
}

/** Curve over lines and evidence; both borders can be moved. */
export function DeskLayout({ curve, lines, evidence }: Layout) {
  return (
    <Splitter orientation="vertical" className={classes.split} withHandle={false} lineSize={1} handleColor="var(--line-2)" step="16px">
      <Splitter.Pane defaultSize={100} min={30} className={classes.pane}>
        {curve}
      </Splitter.Pane>
      <Splitter.Pane defaultSize="360px" min="120px" className={classes.pane}>
        <Splitter className={classes.split} withHandle={false} lineSize={1} handleColor="var(--line-2)" step="16px">
          <Splitter.Pane defaultSize={`${Math.min(736, Math.round(window.innerWidth * 0.52))}px`} min="360px" className={classes.pane}>
            {lines}
          </Splitter.Pane>
          <Splitter.Pane defaultSize={100} min={25} className={classes.pane}>
            {evidence}
          </Splitter.Pane>
        </Splitter>
      </Splitter.Pane>
    </Splitter>
  );
}

/** One column; the claim peeks from below and opens over the table, the curve stays in sight. */
export function PhoneLayout({ curve, lines, evidence, claim }: Layout & { claim: string }) {
  const [open, setOpen] = useState(false);
  const plot = useRef<HTMLDivElement>(null);
  const show = () => {
    setOpen(true);
    plot.current?.scrollIntoView({ block: 'start' }); // the curve stays in sight above the sheet
  };
  return (
    <>
      <div ref={plot} className={classes.inSight}>
        {curve}
      </div>
      {lines}
      <div className={classes.sheet} data-open={open || undefined}>
        <button
          type="button"
          className={classes.grabber}
          aria-expanded={open}
          aria-label={open ? 'Close the evidence' : `Open the evidence: ${claim}`}
          onClick={open ? () => setOpen(false) : show}
        />
        {/* closed, only the claim peeks out: a tap opens it, and nothing hidden takes the focus */}
        <div onClick={open ? undefined : show}>
          <div inert={!open}>{evidence}</div>
        </div>
      </div>
    </>
  );
}
