import { parentPort } from 'node:worker_threads';
import {
  analyse,
  compareSightlines,
  completeSettings,
  DEFAULT_COMPARISON_SETTINGS,
  type LineList,
  type OnProgress,
} from '@foreveil/shared';
import type { FromThread, ToThread } from './protocol.js';
import { warmUp } from './warm-up.js';

/** The thread in which analyses run: it computes and nothing else, so that it can be ended at any moment. */
const lists = new Map<string, LineList>();
const say = (message: FromThread): void => parentPort!.postMessage(message);

/** Progress of one step is told ten times a second at most. */
const PAUSE_MS = 100;

function teller(): OnProgress {
  let told = { step: '', at: 0 };
  return (step, done) => {
    const now = performance.now();
    if (step === told.step && now - told.at < PAUSE_MS) return;
    told = { step, at: now };
    say({ say: 'progress', step, done });
  };
}

parentPort!.on('message', (message: ToThread) => {
  if (message.say === 'keep_list') {
    lists.set(message.listId, message.list);
    warmUp(message.list);
    return;
  }
  try {
    // the database keeps no order of fields: here they get the one in which they are told again
    const list = lists.get(message.listId)!;
    if (message.say === 'compare') {
      const settings = { ...DEFAULT_COMPARISON_SETTINGS, ...message.settings };
      say({ say: 'compared', comparison: compareSightlines(message.a, message.b, list, settings) });
      return;
    }
    const settings = completeSettings(message.settings);
    say({ say: 'done', analysis: analyse(message.spectrum, list, settings, teller()) });
  } catch (error) {
    say({ say: 'failed', reason: error instanceof Error ? error.message : String(error) });
  }
});
