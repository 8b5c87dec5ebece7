import { fixed, parseNumber, typeset } from './number.js';

/** Whole units, minutes and seconds of a value, rounded as a whole so that 59.996 s becomes the next minute. */
function sexagesimal(value: number, secondDecimals: number): [number, number, string] {
  const scale = 10 ** secondDecimals;
  const ticks = Math.round(value * 3600 * scale);
  const seconds = (ticks % (60 * scale)) / scale;
  const minutes = Math.floor(ticks / (60 * scale));
  return [Math.floor(minutes / 60), minutes % 60, seconds.toFixed(secondDecimals).padStart(secondDecimals ? secondDecimals + 3 : 2, '0')];
}

const two = (n: number) => String(n).padStart(2, '0');

/** Right ascension in degrees as '21 14 07.31' hours. */
export function rightAscension(deg: number): string {
  const [h, m, s] = sexagesimal((((deg % 360) + 360) % 360) / 15, 2);
  return `${two(h % 24)} ${two(m)} ${s}`;
}

/** Declination in degrees as '+48 12 51.6'. */
export function declination(deg: number): string {
  const [d, m, s] = sexagesimal(Math.abs(deg), 1);
  return `${deg < 0 ? typeset('-') : '+'}${two(d)} ${two(m)} ${s}`;
}

/** '21 14 07.31  +48 12 51.6', or the half that is known. */
export const position = (raDeg: number | null, decDeg: number | null): string | null => {
  const parts = [raDeg === null ? null : rightAscension(raDeg), decDeg === null ? null : declination(decDeg)].filter(
    (part) => part !== null,
  );
  return parts.length ? parts.join('\u2002') : null;
};

/**
 * A coordinate as people type it: degrees ('318.53', '48,21'), or three numbers ('21 14 07.31', '+48:12:51.6').
 * @param unit what three numbers count: 'hours' for right ascension, 'degrees' for declination
 * @returns degrees, or null when it is no coordinate
 */
export function parseCoordinate(text: string, unit: 'hours' | 'degrees'): number | null {
  const parts = text
    .trim()
    .replace(/\u2212/g, '-')
    .split(/[\s:hmsd°'"′″]+/)
    .filter(Boolean);
  if (parts.length === 1) return parseNumber(parts[0]!);
  if (parts.length < 2 || parts.length > 3) return null;
  const [whole, minutes, seconds] = [...parts.map(parseNumber), 0];
  if (whole == null || minutes == null || seconds == null) return null;
  if (!Number.isInteger(whole) || minutes < 0 || minutes >= 60 || seconds < 0 || seconds >= 60) return null;
  const size = (Math.abs(whole) + minutes / 60 + seconds / 3600) * (unit === 'hours' ? 15 : 1);
  return parts[0]!.startsWith('-') ? -size : size;
}

/** Degrees as typed into a form, without losing digits. */
export const degreesField = (deg: number | null): string => (deg === null ? '' : fixed(deg, 6).replace(/\.?0+$/, ''));

interface Direction {
  readonly raDeg: number;
  readonly decDeg: number;
}

/** Angle between two directions on the sky, arcsec; by the haversine, which keeps small angles exact. */
export function separationArcsec(a: Direction, b: Direction): number {
  const rad = Math.PI / 180;
  const half = (deg: number) => Math.sin((deg * rad) / 2) ** 2;
  const h = half(b.decDeg - a.decDeg) + Math.cos(a.decDeg * rad) * Math.cos(b.decDeg * rad) * half(b.raDeg - a.raDeg);
  return ((2 * Math.asin(Math.min(1, Math.sqrt(h)))) / rad) * 3600;
}

/** '3.2″', '1.4′', '12°'. */
export function separationWords(arcsec: number): string {
  if (arcsec < 60) return `${fixed(arcsec, 1)}″`;
  return arcsec < 3600 ? `${fixed(arcsec / 60, 1)}′` : `${fixed(arcsec / 3600, arcsec < 36_000 ? 1 : 0)}°`;
}
