import { MEMBER_ROLES, roleAllows } from '../contract/index.js';
import { readingInWords } from './reading-in-words.js';
import { REVIEW_ACTIONS, REVIEW_STATES, ROLE_FOR, nextState } from './transitions.js';

test('only what is proposed can be decided, and what is decided only reopened', () => {
  const table = REVIEW_STATES.map((state) => REVIEW_ACTIONS.map((action) => nextState(state, action)));
  expect(table).toEqual([
    ['proposed', 'accepted', 'rejected', null], // propose, accept, reject, reopen
    [null, null, null, 'proposed'],
    [null, null, null, 'proposed'],
  ]);
});

test('readers decide nothing, analysts propose, reviewers and leads do everything', () => {
  const may = MEMBER_ROLES.map((role) => REVIEW_ACTIONS.filter((action) => roleAllows(role, ROLE_FOR[action])));
  expect(may).toEqual([[], ['propose'], [...REVIEW_ACTIONS], [...REVIEW_ACTIONS]]);
});

test('a reading is told in words', () => {
  expect(readingInWords({ species: 'Na I', restNm: 589.158325, family: 'interstellar' })).toBe('Na I 589.1583 nm, interstellar');
  expect(readingInWords({ species: 'Na I', restNm: 589.158325, family: null })).toBe('Na I 589.1583 nm');
  expect(readingInWords({ species: null, restNm: null, family: null })).toBe('unidentified');
});
