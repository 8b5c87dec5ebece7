import type { SpectrumDetail } from '@foreveil/shared';
import type { Api } from '../api.js';
import type { Person, Team } from '../person.js';

/** What is in the programme that a request is made for: a target with one spectrum, analysed, with one feature. */
export interface Stage {
  readonly api: Api;
  readonly team: Team;
  readonly spectrum: SpectrumDetail;
}

/**
 * A request that succeeds when its sender is allowed to make it, and the status of that success.
 *
 * Paths may hold :programmeId, :targetId, :spectrumId, :analysisId and :featureIndex; what else a path holds, `params` makes.
 */
export interface Call {
  readonly body?: object | ((stage: Stage, sender: Person) => object | Promise<object>);
  readonly headers?: Record<string, string>;
  readonly params?: (stage: Stage, sender: Person) => Record<string, string> | Promise<Record<string, string>>;
  /** of the answer to somebody who may; choose a request whose success is plain */
  readonly success: number;
  /** the answer does not end: only its beginning is looked at */
  readonly stream?: true;
}

/** By handler, 'TargetsController.get'. */
export type Calls = Record<string, Call>;
