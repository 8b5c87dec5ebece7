import { Button, Loader, Progress, Radio } from '@mantine/core';
import { airRefractivity, C_KM_PER_S, type Medium, type Reading } from '@foreveil/shared';
import { IconAlertTriangle, IconBan, IconCircleCheck, IconCopyCheck, IconHelpCircle } from '@tabler/icons-react';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { counted, fileSize, fixed, percent, signed } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import type { FileRead } from '../../workers/protocol.js';
import { questions, verdict, type Entry } from './entry.js';
import classes from './upload.module.css';

export interface VerdictActs {
  onMedium: (medium: Medium) => void;
  onSend: () => void;
  onCancel: () => void;
  onLeaveOut: () => void;
  onTakeBack: () => void;
}

interface Props extends VerdictActs {
  programmeId: string;
  entry: Entry;
}

/** What to do about a file: nothing, answer, choose another, wait, or look at what came of it. */
export function VerdictColumn({ programmeId, entry, ...acts }: Props) {
  const { sending, read } = entry;
  switch (verdict(entry)) {
    case 'reading':
      return (
        <Say icon={<Loader size={14} />} title="Reading">
          <p>It is read on this computer; nothing was sent.</p>
        </Say>
      );
    case 'ready':
      return (
        <Say icon={<IconCircleCheck size={18} aria-hidden />} title="Ready">
          <p>The analysis starts with the upload.</p>
          {read?.ok && <Remarks reading={read.reading} />}
          <Acts {...acts} send />
        </Say>
      );
    case 'asks':
      return read?.ok ? <Asks entry={entry} read={read} acts={acts} /> : null;
    case 'unreadable':
      return read && !read.ok ? <Unreadable entry={entry} read={read} acts={acts} /> : null;
    case 'sending':
      return <SendingSay entry={entry} onCancel={acts.onCancel} />;
    case 'added':
      return sending.at === 'added' ? (
        <Say icon={<IconCircleCheck size={18} aria-hidden />} title="Added" live>
          <p>
            To {sending.spectrum.targetName}. Its analysis has started;{' '}
            <Link to={pagePaths.spectrum(programmeId, sending.spectrum.id)}>watch it in the spectrum</Link>.
          </p>
        </Say>
      ) : null;
    case 'duplicate':
      return <Duplicate programmeId={programmeId} entry={entry} onLeaveOut={acts.onLeaveOut} />;
    case 'known':
      return <KnownSay programmeId={programmeId} entry={entry} onLeaveOut={acts.onLeaveOut} />;
    case 'twin':
      return (
        <Say icon={<IconCopyCheck size={18} aria-hidden />} title="Twice on this page" live>
          <p>The same bytes, byte for byte, as {entry.twinOf} further up. It will not be sent.</p>
          <Acts {...acts} />
        </Say>
      );
    case 'refused':
      return (
        <Say icon={<IconBan size={18} aria-hidden />} title="Not added">
          {sending.at === 'refused' && <ErrorNote error={sending.error} onRetry={acts.onSend} />}
          <div className={classes.acts}>
            <Button onClick={acts.onLeaveOut}>Leave out</Button>
          </div>
        </Say>
      );
  }
}

interface SayProps {
  icon: ReactNode;
  title: string;
  /** spoken when it appears */
  live?: boolean;
  children: ReactNode;
}

const Say = ({ icon, title, live = false, children }: SayProps) => (
  <div className={classes.say} {...(live ? { role: 'status' } : {})}>
    <h3>
      {icon}
      {title}
    </h3>
    {children}
  </div>
);

const Acts = ({ onSend, onLeaveOut, send }: Pick<VerdictActs, 'onSend' | 'onLeaveOut'> & { send?: boolean }) => (
  <div className={classes.acts}>
    {send && <Button onClick={onSend}>Add this one</Button>}
    <Button variant="subtle" onClick={onLeaveOut}>
      Leave out
    </Button>
  </div>
);

const MOST_REMARKS = 3;

/** Located remarks of the reader, the rest behind a disclosure. */
function Remarks({ reading: { warnings } }: { reading: Reading }) {
  const rest = warnings.slice(MOST_REMARKS);
  return (
    <>
      {warnings.slice(0, MOST_REMARKS).map(({ sentence }, i) => (
        <p key={i}>{sentence}</p>
      ))}
      {rest.length > 0 && (
        <details className={classes.more}>
          <summary>{counted(rest.length, 'more remark')}</summary>
          {rest.map(({ sentence }, i) => (
            <p key={i}>{sentence}</p>
          ))}
        </details>
      )}
    </>
  );
}

type Read = Extract<FileRead, { ok: true }>;

function Asks({ entry, read, acts }: { entry: Entry; read: Read; acts: VerdictActs }) {
  const open = questions(entry);
  if (!open.includes('medium')) {
    return (
      <Say icon={<IconHelpCircle size={18} aria-hidden />} title={open.includes('target') ? 'Which target?' : 'Which name?'}>
        <p>
          {open.includes('target')
            ? 'Choose a target of the programme, or name a new one.'
            : 'Name the spectrum, so that the team can tell it from others.'}
        </p>
        <Acts {...acts} />
      </Say>
    );
  }
  const { shift, lines } = mediumWords(read);
  return (
    <Say icon={<IconAlertTriangle size={18} aria-hidden />} title="Air or vacuum?">
      <p>Nothing in the file says. The choice moves every velocity by {fixed(shift, 0)} km/s; no line can tell it from a real motion.</p>
      <Radio.Group aria-label="Medium of the wavelengths" value="" onChange={(value) => acts.onMedium(value as Medium)}>
        <div className={classes.answers}>
          <Radio value="vacuum" label={lines.vacuum} />
          <Radio value="air" label={lines.air} />
        </div>
      </Radio.Group>
      <Remarks reading={read.reading} />
      <Acts {...acts} />
    </Say>
  );
}

/** What either answer means: the shift of all velocities, and where a line that everybody knows would then lie. */
export function mediumWords({ face, hint }: Pick<Read, 'face' | 'hint'>): { shift: number; lines: Record<Medium, string> } {
  const shiftAt = (nm: number) => airRefractivity(Math.max(nm, 200)) * C_KM_PER_S;
  const shift = shiftAt(hint?.restNm ?? (face.fromNm + face.toNm) / 2);
  if (!hint) return { shift, lines: { vacuum: 'vacuum', air: 'air' } };
  const at = (velocity: number) => `${hint.name} at ${signed(velocity, 0)} km/s`;
  return { shift, lines: { vacuum: `vacuum: ${at(hint.velocityKmPerS)}`, air: `air: ${at(hint.velocityKmPerS + shift)}` } };
}

function Unreadable({ entry, read, acts }: { entry: Entry; read: Extract<FileRead, { ok: false }>; acts: VerdictActs }) {
  const corrected = Object.keys(entry.corrections).length > 0;
  return (
    <Say icon={<IconBan size={18} aria-hidden />} title="Cannot be read">
      <p role="alert">{read.problem.sentence}</p>
      <div className={classes.acts}>
        {corrected && <Button onClick={acts.onTakeBack}>Take back the corrections</Button>}
        <Button onClick={acts.onLeaveOut}>Leave out</Button>
      </div>
    </Say>
  );
}

function SendingSay({ entry: { sending, file }, onCancel }: { entry: Entry; onCancel: () => void }) {
  const sent = sending.at === 'sending' ? sending.sent : 0;
  const words = sending.at === 'waiting' ? 'Waiting for its turn' : sent < 1 ? `Sending, ${percent(sent)}` : 'The server is reading it';
  const bytes = sending.at === 'sending' && sent < 1 ? `${fileSize(sent * file.size)} of ${fileSize(file.size)}` : null;
  return (
    <Say icon={<Loader size={14} />} title={words}>
      <Progress value={sent * 100} aria-label={`Upload of ${file.name}`} className={classes.progress} />
      {bytes && <p>{bytes}</p>}
      <div className={classes.acts}>
        <Button onClick={onCancel}>Cancel</Button>
      </div>
    </Say>
  );
}

/** Found by its hash before anything was sent. */
function KnownSay({ programmeId, entry: { known }, onLeaveOut }: { programmeId: string; entry: Entry; onLeaveOut: () => void }) {
  return (
    <Say icon={<IconCopyCheck size={18} aria-hidden />} title="Already here" live>
      {known && (
        <p>
          The programme has this file, byte for byte: <Link to={pagePaths.spectrum(programmeId, known.spectrumId)}>{known.label}</Link> of{' '}
          {known.targetName}. It will not be sent. To read it otherwise,{' '}
          <Link to={pagePaths.file(programmeId, known.spectrumId)}>open its file there</Link>.
        </p>
      )}
      <div className={classes.acts}>
        <Button variant="subtle" onClick={onLeaveOut}>
          Leave out
        </Button>
      </div>
    </Say>
  );
}

function Duplicate({ programmeId, entry: { sending }, onLeaveOut }: { programmeId: string; entry: Entry; onLeaveOut: () => void }) {
  const existing = sending.at === 'duplicate' ? sending.existing : null;
  return (
    <Say icon={<IconCopyCheck size={18} aria-hidden />} title="Already here" live>
      <p>
        The programme has this file, byte for byte
        {existing ? (
          <>
            : <Link to={pagePaths.spectrum(programmeId, existing.id)}>{existing.label}</Link> of {existing.targetName}. Nothing was added.
          </>
        ) : (
          '. Nothing was added.'
        )}
      </p>
      <div className={classes.acts}>
        <Button variant="subtle" onClick={onLeaveOut}>
          Leave out
        </Button>
      </div>
    </Say>
  );
}
