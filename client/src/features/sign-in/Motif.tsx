import { useElementSize } from '@mantine/hooks';
import { useMemo } from 'react';
import { FILL_CAP, lightCss } from '../../plot/light.js';
import { LightStrip } from '../../plot/LightStrip.js';
import { usePalette } from '../../plot/palette.js';
import { CLOUD_LINES, MOTIF_FROM_NM, MOTIF_TO_NM, motifColumns } from './motif-spectrum.js';
import classes from './sign-in.module.css';

const HEIGHT = 220;
/** How far from the middle a line meets the ring: small measured differences of velocity, drawn large. */
const SCATTER_PX = [-9, -1, 4, 1, -6, 7, -3, 2, -7, 8, 0, -1, 9, -4, 5];

/** A star's light and the threads of the cloud before it, gathered by one ring over the name. Decoration: the page works without it. */
export function Motif() {
  const columns = useMemo(() => motifColumns(), []);
  const { ref, width } = useElementSize();
  const { scheme } = usePalette();
  const middle = width / 2;
  return (
    <div ref={ref} className={classes.motif} aria-hidden="true">
      <LightStrip wavelengthFromNm={MOTIF_FROM_NM} wavelengthToNm={MOTIF_TO_NM} low={columns} high={columns} height={72} label="" />
      <svg width="100%" height={HEIGHT} viewBox={`0 0 ${Math.max(1, width)} ${HEIGHT}`}>
        {CLOUD_LINES.map(([nm, depth], i) => {
          const x = ((nm - MOTIF_FROM_NM) / (MOTIF_TO_NM - MOTIF_FROM_NM)) * width;
          const meets = middle + (SCATTER_PX[i] ?? 0);
          const path = `M${x},0C${x},${HEIGHT * 0.52} ${meets},${HEIGHT * 0.42} ${meets},${HEIGHT - 18}V${HEIGHT - 2 - Math.abs(meets - middle)}`;
          return <path key={nm} d={path} fill="none" stroke={lightCss(nm, FILL_CAP[scheme])} strokeWidth={0.9 + depth * 1.3} />;
        })}
        <ellipse cx={middle} cy={HEIGHT - 14} rx={34} ry={8} fill="none" stroke="var(--ground)" strokeWidth={5} />
        <ellipse cx={middle} cy={HEIGHT - 14} rx={34} ry={8} fill="none" stroke="var(--ink)" strokeWidth={1.6} />
      </svg>
    </div>
  );
}
