import { parseLines } from '@foreveil/shared';
import { insertProgrammeList } from '../../../../server/src/modules/linelists/line-lists.repository.js';
import type { Calls, Stage } from './call.js';

/** A list of the stage's programme with one line. */
async function ownList({ api, team }: Stage): Promise<string> {
  const { lines } = parseLines('species,wavelength_vac [nm],source\nNa I,589.1583,x');
  const making = { name: 'Own', version: String(Math.random()), citation: '', previousId: null, userId: team.lead.userId, lines };
  return insertProgrammeList(api.db, team, making);
}

const params = async (stage: Stage) => ({ lineListId: await ownList(stage) });

export const calls: Calls = {
  'ProgrammeLineListsController.list': { success: 200 },
  'ProgrammeLineListsController.add': { success: 400 }, // past the door, then refused for sending no file
  'ProgrammeLineListsController.get': { params, success: 200 },
  'ProgrammeLineListsController.lines': { params, success: 200 },
  'ProgrammeLineListsController.csv': { params, success: 200 },
  'ProgrammeLineListsController.diff': {
    params: async (stage) => ({ lineListId: await ownList(stage), otherListId: await ownList(stage) }),
    success: 200,
  },
  'ProgrammeLineListsController.archive': { params, success: 200 },
  'ProgrammeLineListsController.restore': { params, success: 200 },
};
