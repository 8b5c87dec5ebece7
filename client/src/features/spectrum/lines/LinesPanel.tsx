import { Button } from '@mantine/core';
import { useElementSize, useMediaQuery } from '@mantine/hooks';
import type { KeyboardEvent } from 'react';
import type { PageSettings } from '../state/use-page-state.js';
import { LineFilters } from './LineFilters.js';
import { LineTable } from './LineTable.js';
import { asTsv } from './columns.js';
import { NO_FILTER, type SortKey } from './filters.js';
import type { LineRow } from './reading.js';
import classes from './lines.module.css';

/** A pane narrower than this has no room for the counts beside the filters. */
const NARROW_PX = 620;

interface Props {
  /** filtered and sorted */
  rows: readonly LineRow[];
  all: number;
  inView: number;
  settings: PageSettings;
  selected: number | null;
  hovered: number | null;
  pending: ReadonlySet<number>;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
  onKey: (event: KeyboardEvent) => void;
}

/** The table of lines with its filters. */
export function LinesPanel({ rows, all, inView, settings, ...table }: Props) {
  const { filter, setFilter, choice } = settings;
  const coarse = useMediaQuery('(pointer: coarse)', undefined, { getInitialValueInEffect: false });
  const { ref, width } = useElementSize<HTMLElement>();
  const narrow = width > 0 && width < NARROW_PX;
  const onSort = (sort: SortKey) => setFilter({ sort, descending: filter.sort === sort ? !filter.descending : false });
  return (
    <section ref={ref} className={classes.section} aria-label="Table of lines" data-narrow={narrow || undefined}>
      <LineFilters
        filter={filter}
        shown={rows.length}
        inView={inView}
        all={all}
        onFilter={setFilter}
        onCopy={() => navigator.clipboard.writeText(asTsv(rows, choice))}
      />
      {rows.length > 0 ? (
        <LineTable
          {...table}
          paneWidth={width || Infinity}
          rows={rows}
          display={choice}
          filter={filter}
          rowHeight={coarse ? 32 : 28}
          onSort={onSort}
        />
      ) : (
        <div className={classes.none}>
          {all === 0 ? 'The analysis found no line in this spectrum.' : 'No line passes these filters.'}
          {all > 0 && (
            <Button onClick={() => setFilter({ ...NO_FILTER, sort: filter.sort, descending: filter.descending })}>Show all lines</Button>
          )}
        </div>
      )}
    </section>
  );
}
