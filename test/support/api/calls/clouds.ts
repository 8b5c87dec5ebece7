import { apiPaths, type Cloud } from '@foreveil/shared';
import type { Calls, Stage } from './call.js';

let clouds = 0;
const SEEN = { 'If-Match': '"1"' };
const RANGE = { fromKmPerS: -20, toKmPerS: -5, frame: 'barycentric' };

async function aCloud({ team }: Stage): Promise<Record<string, string>> {
  const { body } = await team.analyst.post(apiPaths.clouds(team.programmeId), { name: `Cloud ${++clouds}`, ...RANGE });
  return { cloudId: (body as Cloud).id };
}

async function aCloudWithSightline(stage: Stage): Promise<Record<string, string>> {
  const { team, spectrum } = stage;
  const made = await aCloud(stage);
  await team.analyst.put(apiPaths.cloudSightline(team.programmeId, made.cloudId!, spectrum.id), {});
  return made;
}

export const calls: Calls = {
  'CloudsController.list': { success: 200 },
  'CloudsController.create': { body: { name: 'Veil', ...RANGE }, success: 201 },
  'CloudsController.get': { params: aCloud, success: 200 },
  'CloudsController.change': { params: aCloud, body: { notes: 'seen twice' }, headers: SEEN, success: 200 },
  'CloudsController.remove': { params: aCloud, headers: SEEN, success: 204 },
  'CloudsController.addSightline': { params: aCloud, body: {}, success: 200 },
  'CloudsController.removeSightline': { params: aCloudWithSightline, success: 204 },
};
