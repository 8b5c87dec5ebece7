import type { Column } from '../sightlines/index.js';
import type { Frame } from '../spectrum/index.js';
import type { Iso } from './api.js';

/** Frames in which the velocity of a cloud can be told: those in which it stays put. */
export const CLOUD_FRAMES = ['barycentric', 'heliocentric', 'lsrk', 'lsrd'] as const satisfies readonly Frame[];
export type CloudFrame = (typeof CLOUD_FRAMES)[number];

/** The farthest velocity that the range of a cloud may reach, km/s. */
export const CLOUD_REACH_KM_PER_S = 3000;

/** A cloud of interstellar gas as a thing of the programme: a velocity range, and the sightlines that cross it. */
export interface CloudSummary {
  id: string;
  programmeId: string;
  /** unique within the programme, capitals aside */
  name: string;
  /** km/s in `frame` */
  fromKmPerS: number;
  toKmPerS: number;
  frame: CloudFrame;
  notes: string;
  /** counts changes of the facts above, not of the sightlines */
  version: number;
  sightlineCount: number;
  changedBy: string;
  changedAt: Iso;
}
export interface Cloud extends CloudSummary {
  sightlines: CloudSightline[];
}

/** A spectrum that looks through the cloud, with what the newest comparison that fits measured in it. */
export interface CloudSightline {
  spectrumId: string;
  spectrumLabel: string;
  targetId: string;
  targetName: string;
  simulated: boolean;
  /** ICRS, degrees; null where the target has none */
  raDeg: number | null;
  decDeg: number | null;
  /** null where no completed comparison of this spectrum has a cloud within the range, in the frame of the range */
  measured: CloudMeasure | null;
}

export interface CloudMeasure {
  comparisonId: string;
  comparisonName: string;
  /** the analysis of this spectrum that the comparison rests on */
  analysisId: string;
  /** this spectrum has a newer analysis */
  outdated: boolean;
  /** by velocity; never empty */
  components: CloudComponent[];
}

/** A component within the range of the cloud. */
export interface CloudComponent {
  velocityKmPerS: number;
  velocitySigmaKmPerS: number;
  columns: { species: string; column: Column }[];
}

/** POST clouds. */
export interface NewCloud {
  name: string;
  fromKmPerS: number;
  toKmPerS: number;
  frame: CloudFrame;
  notes?: string;
  /** sightlines that it begins with */
  spectrumIds?: string[];
}
/** PATCH with If-Match; only what is named changes. */
export type CloudChange = Partial<Omit<NewCloud, 'spectrumIds'>>;
