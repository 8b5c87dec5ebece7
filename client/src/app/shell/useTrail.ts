import { useQuery } from '@tanstack/react-query';
import { useLocation, type Params } from 'react-router-dom';
import { pagePaths } from '../../lib/paths.js';
import { programmeQueries, targetQueries } from '../../lib/queries/programmes.js';

interface Place {
  readonly label: string;
  readonly to: string;
}
export interface Crumb extends Place {
  /** what its neighbours are called */
  readonly what: string;
  readonly others: readonly Place[];
}

/** Programme, target, spectrum of the address, as far as they are known yet. */
export function useTrail({ programmeId = '', targetId, spectrumId }: Readonly<Params<string>>): Crumb[] {
  const { pathname } = useLocation();
  const programmes = useQuery({ ...programmeQueries.list(), enabled: programmeId !== '' }).data ?? [];
  const targets = useQuery({ ...targetQueries.list(programmeId), enabled: programmeId !== '' }).data ?? [];
  if (!programmeId) return [];

  const crumb = (what: string, places: readonly Place[], to: string): Crumb[] => {
    const here = places.find((place) => place.to === to);
    return here ? [{ ...here, what, others: places.filter((place) => place !== here) }] : [];
  };
  const target = targets.find(({ id, spectra }) => id === targetId || spectra.some((spectrum) => spectrum.id === spectrumId));
  const trail = crumb(
    'programmes',
    programmes.map(({ id, name }) => ({ label: name, to: pagePaths.programme(id) })),
    pagePaths.programme(programmeId),
  );
  if (target) {
    const places = targets.map(({ id, name }) => ({ label: name, to: pagePaths.target(programmeId, id) }));
    trail.push(...crumb('targets', places, pagePaths.target(programmeId, target.id)));
  }
  if (target && spectrumId) {
    const places = target.spectra.map(({ id, label }) => ({ label, to: pagePaths.spectrum(programmeId, id) }));
    trail.push(...crumb('spectra of this target', places, pagePaths.spectrum(programmeId, spectrumId)));
  }
  const upload = pagePaths.upload(programmeId);
  if (pathname === upload) trail.push({ label: 'Add spectra', to: upload, what: '', others: [] });
  const comparisons = pagePaths.comparisons(programmeId);
  if (pathname.startsWith(comparisons)) trail.push({ label: 'Comparisons', to: comparisons, what: '', others: [] });
  const clouds = pagePaths.clouds(programmeId);
  if (pathname.startsWith(clouds)) trail.push({ label: 'Clouds', to: clouds, what: '', others: [] });
  const recipes = pagePaths.recipes(programmeId);
  if (pathname === recipes) trail.push({ label: 'Reading recipes', to: recipes, what: '', others: [] });
  const lineLists = pagePaths.lineLists(programmeId);
  if (pathname.startsWith(lineLists)) trail.push({ label: 'Line lists', to: lineLists, what: '', others: [] });
  const members = pagePaths.members(programmeId);
  if (pathname === members) trail.push({ label: 'Members', to: members, what: '', others: [] });
  if (target && spectrumId && pathname === pagePaths.file(programmeId, spectrumId))
    trail.push({ label: 'File', to: pathname, what: '', others: [] });
  return trail;
}
