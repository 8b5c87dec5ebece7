import type { TargetKind, TargetSummary } from '@foreveil/shared';
import { useCallback } from 'react';
import { useSearchParams } from 'react-router-dom';
import { KINDS } from '../../lib/kinds.js';

export const ORDERS = { waits: 'Most open lines first', name: 'By name', newest: 'Newest spectrum first' } as const;
export type Order = keyof typeof ORDERS;

/** Which targets are shown, in which order; kept in the address, so that a link or a reload shows the same. */
export interface TargetView {
  readonly text: string;
  readonly kind: TargetKind | '';
  readonly order: Order;
}

/** A value in the address that is not ours counts as not being there. */
export function readView(search: URLSearchParams): TargetView {
  const kind = KINDS.find((one) => one === search.get('kind')) ?? '';
  const order = search.get('order');
  return { text: search.get('name') ?? '', kind, order: order !== null && Object.hasOwn(ORDERS, order) ? (order as Order) : 'waits' };
}

function writeView({ text, kind, order }: TargetView): Record<string, string> {
  return { ...(text ? { name: text } : {}), ...(kind ? { kind } : {}), ...(order === 'waits' ? {} : { order }) };
}

export function useTargetView() {
  const [search, setSearch] = useSearchParams();
  const view = readView(search);
  const change = useCallback(
    (part: { [K in keyof TargetView]?: string }) =>
      setSearch((old) => writeView({ ...readView(old), ...part } as TargetView), { replace: true, preventScrollReset: true }),
    [setSearch],
  );
  return { view, change };
}

const byName = (a: TargetSummary, b: TargetSummary) => a.name.localeCompare(b.name, 'en', { numeric: true });
const newest = ({ spectra }: TargetSummary) => spectra.reduce((latest, { createdAt }) => (createdAt > latest ? createdAt : latest), '');

const COMPARE: Record<Order, (a: TargetSummary, b: TargetSummary) => number> = {
  name: byName,
  waits: (a, b) => b.open - a.open || byName(a, b),
  newest: (a, b) => newest(b).localeCompare(newest(a)) || byName(a, b),
};

export function arrange(targets: readonly TargetSummary[], { text, kind, order }: TargetView): TargetSummary[] {
  const wanted = text.trim().toLocaleLowerCase('en');
  return targets
    .filter((target) => (!kind || target.kind === kind) && target.name.toLocaleLowerCase('en').includes(wanted))
    .sort(COMPARE[order]);
}
