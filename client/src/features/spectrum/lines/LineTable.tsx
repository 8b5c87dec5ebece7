import { useVirtualizer } from '@tanstack/react-virtual';
import { memo, useEffect, useId, useMemo, useRef, type CSSProperties, type KeyboardEvent } from 'react';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { columnsFor, type Column } from './columns.js';
import type { LineFilter, SortKey } from './filters.js';
import type { LineRow } from './reading.js';
import classes from './lines.module.css';

interface Props {
  /** filtered and sorted */
  rows: readonly LineRow[];
  selected: number | null;
  hovered: number | null;
  pending: ReadonlySet<number>;
  display: WavelengthDisplay;
  filter: LineFilter;
  rowHeight: number;
  /** of the pane, CSS px */
  paneWidth: number;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
  onSort: (key: SortKey) => void;
  /** keys that the table itself does not use */
  onKey: (event: KeyboardEvent) => void;
}

const HEAD = 28;
/** In a pane narrower than this the equivalent width stands without its error. */
const SHORT_PX = 460;
const SHORT_WIDTH = '62px';
/** A selection that moves farther than this many rows is brought to the middle. */
const JUMP = 3;

/** Where a key takes the selection, as a place in the list; null when it is no key of the table. */
function placeAfter(key: string, place: number, last: number, page: number): number | null {
  const moves: Record<string, number> = {
    ArrowDown: place + 1,
    ArrowUp: place < 0 ? last : place - 1,
    PageDown: place + page,
    PageUp: place - page,
    Home: 0,
    End: last,
  };
  const to = moves[key];
  return to === undefined ? null : Math.max(0, Math.min(last, to));
}

/** The lines as a grid of rows: virtual, sortable, one tab stop. The selected row is the active one. */
export function LineTable(props: Props) {
  const { rows, selected, display, rowHeight, paneWidth, onSelect } = props;
  const scroller = useRef<HTMLDivElement>(null);
  const gridId = useId();
  const columns = useMemo(() => columnsFor(paneWidth), [paneWidth]);
  const tracks = columns.map((c) => (c.key === 'width' && paneWidth < SHORT_PX ? SHORT_WIDTH : c.width)).join(' ');
  // eslint-disable-next-line react-hooks/incompatible-library -- rows are drawn from it right here and nowhere memoised
  const virtual = useVirtualizer({
    count: rows.length,
    getScrollElement: () => scroller.current,
    estimateSize: () => rowHeight,
    overscan: 10,
    paddingStart: HEAD,
    scrollPaddingStart: HEAD,
  });
  const lastPlace = useRef(-JUMP - 1);
  const place = rows.findIndex((r) => r.feature.index === selected);

  useEffect(() => {
    if (place >= 0) virtual.scrollToIndex(place, { align: Math.abs(place - lastPlace.current) > JUMP ? 'center' : 'auto' });
    lastPlace.current = place;
    // only when the selection moves: scrolling away by hand must stay possible
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [place, rowHeight]);

  const onKeyDown = (event: KeyboardEvent) => {
    const page = Math.max(1, Math.floor((scroller.current?.clientHeight ?? 300) / rowHeight) - 2);
    const to =
      event.ctrlKey || event.altKey || event.metaKey || event.shiftKey ? null : placeAfter(event.key, place, rows.length - 1, page);
    const row = to === null ? undefined : rows[to];
    if (!row) return props.onKey(event);
    event.preventDefault();
    onSelect(row.feature.index);
  };
  const drawn = virtual.getVirtualItems();
  const isDrawn = drawn.some((item) => item.index === place);

  return (
    <div
      ref={scroller}
      className={classes.grid}
      data-short={paneWidth < SHORT_PX || undefined}
      style={{ '--tracks': tracks } as CSSProperties}
      role="grid"
      tabIndex={0}
      aria-label="Lines"
      aria-rowcount={rows.length + 1}
      aria-colcount={columns.length}
      aria-activedescendant={isDrawn ? `${gridId}-${selected}` : undefined}
      onKeyDown={onKeyDown}
    >
      <div role="rowgroup" className={classes.head}>
        <div role="row" aria-rowindex={1} className={classes.row} style={{ height: HEAD }}>
          {columns.map((column) => (
            <HeadCell key={column.key} column={column} {...props} />
          ))}
        </div>
      </div>
      <div role="rowgroup" style={{ height: virtual.getTotalSize() - HEAD, position: 'relative' }}>
        {drawn.map((item) => {
          const row = rows[item.index];
          if (!row) return null;
          const { index } = row.feature;
          return (
            <Row
              key={index}
              id={`${gridId}-${index}`}
              row={row}
              place={item.index}
              top={item.start - HEAD}
              height={rowHeight}
              columns={columns}
              display={display}
              isSelected={index === selected}
              isHovered={index === props.hovered}
              isPending={props.pending.has(index)}
              onSelect={onSelect}
              onHover={props.onHover}
            />
          );
        })}
      </div>
    </div>
  );
}

function HeadCell({ column, display, filter, onSort }: Props & { column: Column }) {
  const { key } = column;
  if (key === 'mark')
    return (
      <div role="columnheader" className={classes.cell}>
        <span className={classes.unseen}>Family and state</span>
      </div>
    );
  const isSorted = filter.sort === key;
  return (
    <div
      role="columnheader"
      aria-sort={isSorted ? (filter.descending ? 'descending' : 'ascending') : undefined}
      className={classes.cell}
      data-number={column.number || undefined}
      data-key={key}
    >
      <button type="button" tabIndex={-1} className={classes.sort} onClick={() => onSort(key)}>
        {column.title(display)}
        {isSorted && (key !== 'wavelength' || filter.descending) && <span aria-hidden="true">{filter.descending ? ' ↓' : ' ↑'}</span>}
      </button>
    </div>
  );
}

interface RowProps {
  id: string;
  row: LineRow;
  place: number;
  top: number;
  height: number;
  columns: readonly Column[];
  display: WavelengthDisplay;
  isSelected: boolean;
  isHovered: boolean;
  isPending: boolean;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
}

const Row = memo(function Row({
  id,
  row,
  place,
  top,
  height,
  columns,
  display,
  isSelected,
  isHovered,
  isPending,
  onSelect,
  onHover,
}: RowProps) {
  const { index } = row.feature;
  return (
    <div
      role="row"
      id={id}
      aria-rowindex={place + 2}
      aria-selected={isSelected}
      aria-busy={isPending || undefined}
      className={classes.row}
      data-hovered={isHovered || undefined}
      style={{ height, top }}
      onClick={() => onSelect(index)}
      onPointerEnter={() => onHover(index)}
      onPointerLeave={() => onHover(null)}
    >
      {columns.map((column) => (
        <div key={column.key} role="gridcell" className={classes.cell} data-number={column.number || undefined} data-key={column.key}>
          {column.cell(row, display)}
        </div>
      ))}
    </div>
  );
});
