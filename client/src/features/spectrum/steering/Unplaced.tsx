import { Button } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { roleAllows, type Identification, type MemberRole, type UnplacedDecision } from '@foreveil/shared';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { errorSentence } from '../../../lib/error-sentences.js';
import { keepDecision, placeDecision, unplacedQueries } from '../../../lib/queries/steering.js';
import { spectrumQueries } from '../../../lib/queries/spectra.js';
import { speciesName } from '../../../lib/species.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { STATE_WORD } from '../../../plot/marks.js';
import type { LineRow } from '../lines/reading.js';
import { printerFor } from './words.js';
import classes from './steering.module.css';

interface Props {
  programmeId: string;
  spectrumId: string;
  analysisId: string;
  role: MemberRole | null;
  display: WavelengthDisplay;
  selected: LineRow | null;
  onShow: (nm: number) => void;
}

/** Decisions that the run on the page left without a feature: none is lost, each is looked at, kept, or put on the chosen line. */
export function Unplaced({ programmeId, spectrumId, analysisId, role, display, selected, onShow }: Props) {
  const client = useQueryClient();
  const { data } = useQuery(unplacedQueries.list(programmeId, spectrumId));
  const settled = { onSettled: () => client.invalidateQueries({ queryKey: spectrumQueries.all(programmeId, spectrumId) }) };
  const failed = (title: string) => (error: unknown) => void notifications.show({ title, message: errorSentence(error) });
  const keep = useMutation({
    mutationFn: (decision: Identification) => keepDecision(programmeId, decision),
    onError: failed('Not kept'),
    ...settled,
  });
  const place = useMutation({
    mutationFn: ({ decision, featureIndex }: { decision: Identification; featureIndex: number }) =>
      placeDecision(programmeId, decision, { analysisId, featureIndex }),
    onError: failed('Not moved'),
    ...settled,
  });
  const open = data?.filter(({ kept }) => kept === null) ?? [];
  const kept = data?.filter((one) => one.kept !== null) ?? [];
  if (!data || data.length === 0) return null;
  const busy = keep.isPending || place.isPending;
  return (
    <details className={classes.unplaced} open={open.length > 0 || undefined}>
      <summary>
        <b>{open.length > 0 ? heading(open.length) : `${kept.length} kept without a feature in this run`}</b>
      </summary>
      <ul>
        {[...open, ...kept].map((one) => (
          <li key={one.identification.id}>
            <span>{wordsFor(one, display)}</span>
            <Button size="compact-xs" onClick={() => onShow(one.identification.wavelengthNm)}>
              Show
            </Button>
            {role && roleAllows(role, 'analyst') && !one.kept && (
              <Button size="compact-xs" disabled={busy} onClick={() => keep.mutate(one.identification)}>
                Keep
              </Button>
            )}
            {role && mayPlace(role, one) && (
              <Button
                size="compact-xs"
                disabled={
                  busy || selected === null || selected.identification !== null || selected.feature.kind !== one.identification.kind
                }
                title={whyNot(selected, one) ?? undefined}
                onClick={() => selected && place.mutate({ decision: one.identification, featureIndex: selected.feature.index })}
              >
                Put on the chosen line
              </Button>
            )}
          </li>
        ))}
      </ul>
    </details>
  );
}

const heading = (n: number) => (n === 1 ? '1 decision has no feature in this run' : `${n} decisions have no feature in this run`);
const mayPlace = (role: MemberRole, { identification }: UnplacedDecision) =>
  roleAllows(role, identification.state === 'proposed' ? 'analyst' : 'reviewer');

function whyNot(selected: LineRow | null, { identification }: UnplacedDecision): string | null {
  if (!selected) return 'Choose the line first';
  if (selected.identification) return 'The chosen line has a decision of its own';
  return selected.feature.kind === identification.kind ? null : `The chosen line is a ${selected.feature.kind}`;
}

function wordsFor({ identification: i, kept }: UnplacedDecision, display: WavelengthDisplay): string {
  const print = printerFor(display);
  const what = i.species ? `${speciesName(i.species)} ${i.restNm === null ? '' : print(i.restNm)}` : 'unidentified';
  const by = i.decidedBy ? ` by ${i.decidedBy}` : '';
  return `${what}, seen at ${print(i.wavelengthNm)}, ${STATE_WORD[i.state]}${by}${kept ? `; kept by ${kept.by}` : ''}`;
}
