/** Who looked where, and when: all that a velocity frame needs. */
export interface Observation {
  /** Modified Julian Date, UTC, of the middle of the exposure */
  readonly mjdUtc: number;
  readonly site: GeodeticSite;
  readonly pointing: IcrsDirection;
}

/** WGS 84; longitude positive to the east. */
export interface GeodeticSite {
  readonly latitudeDeg: number;
  readonly longitudeDegEast: number;
  readonly heightM: number;
}

/** ICRS degrees. */
export interface IcrsDirection {
  readonly raDeg: number;
  readonly decDeg: number;
}

export type Vector3 = readonly [number, number, number];

const RAD = Math.PI / 180;

/** Unit vector of a direction. */
export function unitVector({ raDeg, decDeg }: IcrsDirection): Vector3 {
  const [ra, dec] = [raDeg * RAD, decDeg * RAD];
  return [Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec)];
}

export const dot = (a: Vector3, b: Vector3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
