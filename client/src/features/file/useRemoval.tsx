import { Button } from '@mantine/core';
import { modals } from '@mantine/modals';
import { notifications } from '@mantine/notifications';
import type { SpectrumDetail } from '@foreveil/shared';
import { useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { removeSpectrum, restoreSpectrum } from '../../lib/queries/files.js';
import { programmeQueries } from '../../lib/queries/programmes.js';

/** Removes a spectrum after a question; what was removed can be put back from the message, and later from the page of recipes. */
export function useRemoval(programmeId: string, spectrum: SpectrumDetail) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const refresh = () => client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });
  const putBack = async (message: string) => {
    notifications.hide(message);
    try {
      await restoreSpectrum(programmeId, spectrum.id);
      await refresh();
      await navigate(pagePaths.spectrum(programmeId, spectrum.id));
    } catch (error) {
      notifications.show({ title: 'It was not put back', message: errorSentence(error) });
    }
  };
  const remove = async () => {
    try {
      await removeSpectrum(programmeId, spectrum);
    } catch (error) {
      notifications.show({ title: 'Nothing was removed', message: errorSentence(error) });
      return refresh();
    }
    await navigate(pagePaths.target(programmeId, spectrum.targetId));
    const message = notifications.show({
      title: `${spectrum.label} was removed`,
      autoClose: 20_000,
      message: (
        <Button variant="subtle" onClick={() => void putBack(message)}>
          Put it back
        </Button>
      ),
    });
    await refresh();
  };
  return {
    ask: () =>
      modals.openConfirmModal({
        title: `Remove ${spectrum.label}?`,
        children: (
          <p>
            The spectrum of {spectrum.targetName}, its analyses and the decisions on it leave every page and report. It can be put back from
            the page of reading recipes; with decisions on it, only a lead may do either.
          </p>
        ),
        labels: { confirm: 'Remove it', cancel: 'Keep it' },
        confirmProps: { variant: 'filled' },
        onConfirm: () => void remove(),
      }),
  };
}
