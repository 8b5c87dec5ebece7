import { atJ2000, geodeticOf } from '../../frames/index.js';
import { assumed, notStated, stated } from '../columns/medium.js';
import type { Pointing, Site, Stated } from '../types.js';
import { findAngle, type FactSource } from './source.js';

/** Latitude, longitude and height as observatories call them; the sign of the longitude is a matter of habit there. */
const SITE_KEYWORDS: readonly (readonly [string, string, readonly string[]])[] = [
  ['SITELAT', 'SITELONG', ['SITEELEV', 'SITEALT']],
  ['SITE-LAT', 'SITE-LON', ['SITE-ALT', 'SITE-ELEV']],
  ['LATITUDE', 'LONGITUD', ['ALTITUDE', 'HEIGHT', 'ELEVATION']],
  ['LATITUDE', 'LONGITUDE', ['ALTITUDE', 'HEIGHT', 'ELEVATION']],
  ['LAT-OBS', 'LONG-OBS', ['ALT-OBS']],
  ['OBS-LAT', 'OBS-LONG', ['OBS-ELEV', 'OBS-ALT']],
  ['OBS-LAT', 'OBS-LON', ['OBS-ELEV', 'OBS-ALT']],
  ['GEO_LAT', 'GEO_LONG', ['GEO_ELEV']],
  ['GEOLAT', 'GEOLON', ['GEOELEV']],
  ['BSS_LAT', 'BSS_LONG', ['BSS_ELEV']],
];

/** Place of the telescope: geocentric metres, geodetic degrees by the standard or by an archive, or what observatories write. */
export function siteOf(source: FactSource): Stated<Site | null> {
  const [x, y, z] = ['OBSGEO-X', 'OBSGEO-Y', 'OBSGEO-Z'].map((keyword) => source.number(keyword)?.value ?? NaN);
  const geocentric = geodeticOf(x!, y!, z!);
  if (geocentric) return stated(geocentric, 'OBSGEO-X, OBSGEO-Y, OBSGEO-Z');
  return (
    siteBy(source, 'OBSGEO-B', 'OBSGEO-L', ['OBSGEO-H'], stated) ??
    siteBy(source, 'ESO TEL GEOLAT', 'ESO TEL GEOLON', ['ESO TEL GEOELEV'], stated) ??
    SITE_KEYWORDS.reduce<Stated<Site> | null>(
      (found, [latitude, longitude, height]) => found ?? siteBy(source, latitude, longitude, height, eastAssumed),
      null,
    ) ??
    notStated(null)
  );
}

const eastAssumed = <T>(value: T, where: string): Stated<T> => assumed(value, `${where}; longitude taken as positive to the east`);

function siteBy(
  source: FactSource,
  latitude: string,
  longitude: string,
  height: readonly string[],
  known: (site: Site, where: string) => Stated<Site>,
): Stated<Site> | null {
  const b = findAngle(source, [latitude]);
  const l = findAngle(source, [longitude]);
  if (!b || !l || Math.abs(b.value) > 90 || Math.abs(l.value) > 360) return null;
  const h = source.number(...height);
  const isHeight = h !== null && h.value > -500 && h.value < 10_000;
  const longitudeDegEast = l.value > 180 ? l.value - 360 : l.value < -180 ? l.value + 360 : l.value;
  const site = { latitudeDeg: b.value, longitudeDegEast, heightM: isHeight ? h.value : 0 };
  return known(site, `${b.where}, ${l.where}${isHeight ? `, ${h.where}` : '; height taken as 0 m, worth 0.4 m/s at most'}`);
}

const RA = ['RA_TARG', 'RA_OBJ', 'PLUG_RA', 'RA', 'RA2000', 'OBJCTRA', 'RA-DEG'];
const DEC = ['DEC_TARG', 'DEC_OBJ', 'PLUG_DEC', 'DEC', 'DEC2000', 'OBJCTDEC', 'DEC-DEG'];

/**
 * Direction of the telescope in ICRS. FK5 of 2000 agrees with it to a fraction of an arcsecond; other equinoxes are precessed.
 * Galactic and apparent coordinates are left alone.
 */
export function pointingOf(source: FactSource): Stated<Pointing | null> {
  const ra = findAngle(source, RA, 15);
  const dec = findAngle(source, DEC);
  if (!ra || !dec || ra.value < 0 || ra.value >= 360 || Math.abs(dec.value) > 90) return notStated(null);
  const where = `${ra.where}, ${dec.where}`;
  const system = source.text('RADESYS', 'RADECSYS')?.value.toUpperCase() ?? '';
  const equinox = equinoxOf(source, system);
  if (equinox === null) return notStated(null);
  const asWritten = { raDeg: ra.value, decDeg: dec.value };
  if (equinox === 2000) return stated(asWritten, where);
  return stated(atJ2000(asWritten, equinox), `${where}, precessed from equinox ${equinox}`);
}

/** Year of the mean equinox; null for a system that is not handled. FITS Standard 4.0 section 8.3: without both cards it is ICRS. */
function equinoxOf(source: FactSource, system: string): number | null {
  if (system === 'ICRS') return 2000;
  if (system !== '' && system !== 'FK5' && system !== 'FK4') return null;
  const text = source.text('EQUINOX', 'EPOCH')?.value ?? '';
  const year = source.number('EQUINOX', 'EPOCH')?.value ?? Number(/^[BJ]?(\d{4}(?:\.\d+)?)$/.exec(text)?.[1] ?? NaN);
  if (Number.isNaN(year)) return system === 'FK4' ? 1950 : 2000;
  return year >= 1850 && year <= 2100 ? year : null;
}
