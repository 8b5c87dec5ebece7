/** How much of a file is looked at before it is refused. The defaults fit a browser worker and a small server alike. */
export interface ReadLimits {
  /** most bytes that a gzip file may unpack to */
  readonly unpackedBytes: number;
  /** most bytes unpacked for one packed byte, looked at once `ratioFromBytes` are unpacked */
  readonly unpackRatio: number;
  readonly ratioFromBytes: number;
  /** most samples of one spectrum, before anything is merged */
  readonly points: number;
  /** most cards in one FITS header */
  readonly headerCards: number;
  /** most bytes in one line of a text table */
  readonly lineBytes: number;
  /** most columns of a text table; a FITS table has its own limit, 999 */
  readonly textColumns: number;
}

const MIB = 1024 * 1024;

export const DEFAULT_READ_LIMITS: ReadLimits = {
  unpackedBytes: 256 * MIB,
  unpackRatio: 100,
  ratioFromBytes: 4 * MIB,
  points: 5_000_000,
  headerCards: 20_000,
  lineBytes: MIB / 4,
  textColumns: 1000,
};
