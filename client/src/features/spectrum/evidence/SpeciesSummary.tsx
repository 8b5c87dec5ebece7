import { Drawer } from '@mantine/core';
import { useDisclosure, useMediaQuery } from '@mantine/hooks';
import type { Analysis, SpeciesPresence } from '@foreveil/shared';
import { counted, probability, withError } from '../../../lib/number.js';
import { speciesName } from '../../../lib/species.js';
import { Mark } from '../../../plot/Mark.js';
import { FAMILY_WORD } from '../../../plot/marks.js';
import type { PageSettings } from '../state/use-page-state.js';
import { How } from './How.js';
import classes from './evidence.module.css';

/** Which species show in which system, how sure that is, and what their lines say. A press filters the lines. */
export function SpeciesSummary({ analysis, settings }: { analysis: Analysis; settings: Pick<PageSettings, 'setFilter'> }) {
  const [opened, { open, close }] = useDisclosure(false);
  const isPhone = useMediaQuery('(max-width: 900px)', undefined, { getInitialValueInEffect: false });
  const species = analysis.species ?? [];
  const filter = ({ species: name, systemId }: SpeciesPresence) => {
    settings.setFilter({ system: systemId, text: `"${name}"` });
    if (isPhone) close();
  };
  return (
    <>
      <button type="button" aria-expanded={opened} onClick={opened ? close : open}>
        Species
      </button>
      <Drawer
        opened={opened}
        onClose={close}
        title="Species by system"
        position={isPhone ? 'bottom' : 'right'}
        size={isPhone ? '70%' : 440}
        withOverlay={false}
        trapFocus={false}
        lockScroll={false}
        closeOnClickOutside={false}
        closeButtonProps={{ 'aria-label': 'Close the species' }}
        classNames={{ inner: classes.speciesInner, content: classes.speciesDrawer }}
      >
        {analysis.species === undefined && (
          <p className={classes.quiet}>This run is of an earlier program. Run it again to have its species.</p>
        )}
        {analysis.species?.length === 0 && <p className={classes.quiet}>No species shows in any system.</p>}
        {analysis.systems.map((system) => {
          const own = species.filter((s) => s.systemId === system.id);
          if (own.length === 0) return null;
          return (
            <section key={system.id} className={classes.speciesSystem} aria-label={`${FAMILY_WORD[system.family]} ${system.id}`}>
              <h3>
                <Mark family={system.family} state="accepted" size={14} /> {FAMILY_WORD[system.family]}{' '}
                {withError(system.velocityKmPerS, system.velocitySigmaKmPerS, true)} km/s
              </h3>
              <ul>
                {own.map((s) => (
                  <li key={s.species}>
                    <button type="button" title="Show only its lines" onClick={() => filter(s)}>
                      {speciesName(s.species)}
                    </button>
                    <span className={classes.speciesSure}>{probability(s.probability)}</span>
                    <span className={classes.quiet}>{tally(s)}</span>
                    <p>{s.sentence}</p>
                  </li>
                ))}
              </ul>
            </section>
          );
        })}
        <p className={classes.quiet}>
          <How of="species">How computed</How>
        </p>
      </Drawer>
    </>
  );
}

const tally = ({ seen, missing, belowLimit }: SpeciesPresence) =>
  [`${counted(seen, 'line')} seen`, missing > 0 && `${missing} missing`, belowLimit > 0 && `${belowLimit} below the limit`]
    .filter(Boolean)
    .join(', ');
