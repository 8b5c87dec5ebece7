import { useView, type Range, type ViewStore } from './view.js';
import classes from './plot.module.css';

/** A stretch of the spectrum that is shown as such: masked or moved by the run on the page or the next one, or marked by hand. */
export interface Stretch extends Range {
  readonly kind: 'masked' | 'moved' | 'marked';
  readonly word: string;
}

interface Props {
  stretches: readonly Stretch[];
  view: ViewStore;
  left: number;
  width: number;
  height: number;
}

/** Bands over staves and curve: hatched where masked, framed where marked, each with its word. */
export function Stretches({ stretches, view, left, width, height }: Props) {
  const { fromNm, toNm } = useView(view);
  const x = (nm: number) => Math.max(0, Math.min(width, ((nm - fromNm) / (toNm - fromNm)) * width));
  return stretches
    .filter((s) => s.toNm > fromNm && s.fromNm < toNm)
    .map((s) => (
      <div
        key={`${s.kind} ${s.fromNm} ${s.toNm}`}
        className={classes.stretch}
        data-kind={s.kind}
        style={{ left: left + x(s.fromNm), width: Math.max(2, x(s.toNm) - x(s.fromNm)), height }}
      >
        <span>{s.word}</span>
      </div>
    ));
}
