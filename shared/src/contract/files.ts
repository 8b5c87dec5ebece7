import type { ReadingCorrections } from '../reading/index.js';
import type { FileSignature } from '../recipes/index.js';
import type { Iso } from './api.js';

/** How files of one kind are to be read: a team's correction, kept under a name. */
export interface ReadingRecipe {
  id: string;
  name: string;
  /** files that it is offered for */
  signature: FileSignature;
  corrections: ReadingCorrections;
  createdBy: string;
  createdAt: Iso;
  changedBy: string;
  changedAt: Iso;
  version: number;
}
export interface NewReadingRecipe {
  name: string;
  signature: FileSignature;
  corrections: ReadingCorrections;
}
/** Only what is named changes. */
export type ChangeReadingRecipe = Partial<NewReadingRecipe>;

/** A file of a programme by its hash, asked for before anything is sent. */
export interface KnownFile {
  sha256: string;
  spectrumId: string;
  label: string;
  targetId: string;
  targetName: string;
}

/** Name or target of a spectrum; only what is named changes. */
export interface ChangeSpectrum {
  label?: string;
  targetId?: string;
}

/** All corrections that hold from now on; `{}` reads the file as it stands. The original bytes are read again, and a new analysis starts. */
export interface ChangeReading {
  corrections: ReadingCorrections;
  /** name of the recipe that they come from */
  recipe?: string;
}

/** One way in which the file of a spectrum was read; the last one holds. */
export interface ReadingEvent {
  revision: number;
  at: Iso;
  by: string;
  corrections: ReadingCorrections;
  recipe: string | null;
  points: number;
  fromNm: number;
  toNm: number;
}

/** A spectrum that was removed and can be put back. */
export interface RemovedSpectrum {
  id: string;
  label: string;
  fileName: string;
  targetId: string;
  targetName: string;
  decisions: number;
  removedBy: string;
  removedAt: Iso;
  version: number;
}
