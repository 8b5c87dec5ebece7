import { describe, expect, it } from 'vitest';
import { aFace, aReading, aSpectrumDetail, aTargetSummary } from '../../test/things.js';
import type { FileRead } from '../../workers/protocol.js';
import { changeEntries, freshEntry, newcomers, NO_CORRECTIONS } from './entries.js';
import { guessTarget, isUnfinished, metaOf, nearestTarget, questions, sameTarget, similarCount, verdict, type Entry } from './entry.js';
import { makeQueue } from './send-entry.js';
import { standing } from './SendBar.js';
import { correctionWords, howKnown, withCorrection } from '../../components/reading/words.js';

const good: FileRead = { ok: true, reading: aReading(), face: aFace(), hint: null };
const noMedium: FileRead = { ...good, reading: aReading({ medium: { value: 'vacuum', how: 'not_stated', where: '' } }) };
const bad: FileRead = { ok: false, problem: { code: 'x', sentence: 'At line 4 a number is missing.', row: 4 }, lines: [] };
const file = (name = 'heron4b_ech.fits.gz') => new File(['x'], name, { lastModified: 1 });
const target = { name: 'Heron 4 A', kind: 'star', why: 'object' } as const;

const entry = (parts: Partial<Entry> = {}): Entry => ({ ...freshEntry(file(), 1), target, read: good, ...parts });

describe('what a file still needs', () => {
  it('nothing, when all is stated', () => {
    expect(questions(entry())).toEqual([]);
    expect(verdict(entry())).toBe('ready');
  });
  it('the medium when the file does not say it, a target and a name when there is none', () => {
    expect(questions(entry({ read: noMedium, target: { ...target, name: ' ' }, label: '' }))).toEqual(['medium', 'target', 'label']);
    expect(verdict(entry({ read: noMedium }))).toBe('asks');
  });
  it('below 200 nm vacuum is the convention and no question', () => {
    const uv = { ...good, reading: aReading({ medium: { value: 'vacuum', how: 'assumed', where: 'below 200 nm' } }) };
    expect(verdict(entry({ read: uv }))).toBe('ready');
  });
  it('is being read before it is judged, also again after a correction', () => {
    expect(verdict(entry({ read: null }))).toBe('reading');
    expect(verdict(entry({ rereading: true }))).toBe('reading');
    expect(verdict(entry({ read: bad }))).toBe('unreadable');
  });
});

describe('where a spectrum goes', () => {
  const known = aTargetSummary({ name: 'Heron 4 A' });
  it('to the target whose page one came from', () => {
    expect(guessTarget(aReading(), 'x.fits', [known], aTargetSummary({ name: 'Heron 7' }))).toMatchObject({ name: 'Heron 7', why: 'page' });
  });
  it('to the target that OBJECT names, however it is written', () => {
    const reading = aReading({ objectName: { value: 'HERON_4  a', how: 'stated', where: 'OBJECT' } });
    expect(guessTarget(reading, 'x.fits', [known], undefined)).toEqual({ name: 'Heron 4 A', kind: 'star', why: 'object' });
    expect(sameTarget('Heron 4 B', [known])).toBeUndefined();
  });
  it('to a new target of the file’s name when nothing is said', () => {
    const reading = aReading({ objectName: { value: null, how: 'not_stated', where: '' } });
    expect(guessTarget(reading, 'heron33_r5000.csv', [known], undefined)).toMatchObject({ name: 'heron33_r5000', why: 'file_name' });
  });
  it('is told to the server by id when it exists, else by name and kind', () => {
    expect(metaOf(entry(), [known])).toEqual({ targetId: 'target-1', label: 'heron4b_ech' });
    expect(metaOf(entry({ corrections: { medium: 'air' } }), [])).toEqual({
      ...{ targetName: 'Heron 4 A', targetKind: 'star', label: 'heron4b_ech', corrections: { medium: 'air' } },
    });
  });
});

describe('the files on the page', () => {
  it('a file chosen twice shows once', () => {
    expect(newcomers([entry()], [file(), file('b'), file('b')]).map(({ name }) => name)).toEqual(['b']);
  });
  it('an answer to corrections that have changed since is out of date', () => {
    const corrected = changeEntries([entry()], { type: 'corrected', id: 1, corrections: { medium: 'air' } });
    const late = changeEntries(corrected, { type: 'read', id: 1, corrections: NO_CORRECTIONS, read: bad, guess: null, signature: null });
    expect(late[0]!.read).toBe(good);
    expect(verdict(late[0]!)).toBe('reading');
    const right = changeEntries(late, {
      type: 'read',
      id: 1,
      corrections: corrected[0]!.corrections,
      read: bad,
      guess: null,
      signature: null,
    });
    expect(verdict(right[0]!)).toBe('unreadable');
  });
  it('a target that a person chose stays through later readings', () => {
    const chosen = { name: 'Mine', kind: 'nebula', why: 'chosen' } as const;
    const [after] = changeEntries([entry({ target: chosen })], {
      type: 'read',
      id: 1,
      corrections: NO_CORRECTIONS,
      read: good,
      guess: target,
      signature: null,
    });
    expect(after!.target).toBe(chosen);
  });
  it('after a refusal a correction makes it ready again', () => {
    const refused = entry({ sending: { at: 'refused', error: new Error('no') } });
    const [after] = changeEntries([refused], { type: 'targeted', id: 1, target: { ...target, name: 'Other' } });
    expect(verdict(after!)).toBe('ready');
  });
  it('only what is done or hopeless may be left without asking', () => {
    expect(isUnfinished(entry({ sending: { at: 'added', spectrum: aSpectrumDetail() } }))).toBe(false);
    expect(isUnfinished(entry({ sending: { at: 'duplicate', existing: null } }))).toBe(false);
    expect(isUnfinished(entry({ read: bad }))).toBe(false);
    for (const open of [entry(), entry({ read: noMedium }), entry({ sending: { at: 'sending', sent: 0.4 } })])
      expect(isUnfinished(open)).toBe(true);
  });
  it('says how all of them stand', () => {
    expect(standing([entry(), entry({ read: bad })])).toBe('1 of 2 can go now; the others stay on this page.');
    expect(standing([entry({ sending: { at: 'waiting' } }), entry()])).toBe('1 on its way, 0 added.');
    expect(standing([entry({ sending: { at: 'added', spectrum: aSpectrumDetail() } })])).toBe('All are added; their analyses run.');
    expect(standing([entry({ sending: { at: 'duplicate', existing: null } })])).toBe('Nothing is left to add.');
    expect(standing([entry({ read: noMedium })])).toBe('1 file needs a look.');
  });
});

describe('files with the same bytes', () => {
  const read = { ...good, sha256: 'ab' };
  const two = () =>
    [entry({ id: 1 }), entry({ id: 2, file: file('copy.fits') })].reduce(
      (entries, { id }) => changeEntries(entries, { type: 'read', id, corrections: NO_CORRECTIONS, read, guess: target, signature: null }),
      [entry({ id: 1 }), entry({ id: 2, file: file('copy.fits') })] as readonly Entry[],
    );
  it('are sent once: the second says which one it is the same as, until that one is left out', () => {
    expect(two().map(verdict)).toEqual(['ready', 'twin']);
    expect(two()[1]!.twinOf).toBe('heron4b_ech.fits.gz');
    const [left] = changeEntries(two(), { type: 'left_out', id: 1 });
    expect(verdict(left!)).toBe('ready');
  });
  it('are known as soon as the first of them is added', () => {
    const spectrum = aSpectrumDetail({ id: 'new-1', label: 'night 1', sha256: 'ab' });
    const after = changeEntries(two(), { type: 'sending', id: 1, sending: { at: 'added', spectrum } });
    expect(after.map(verdict)).toEqual(['added', 'known']);
    expect(after[1]!.known).toMatchObject({ spectrumId: 'new-1', label: 'night 1' });
  });
  it('are not sent at all when the programme has them', () => {
    const known = { sha256: 'ab', spectrumId: 's', label: 'night 1', targetId: 't', targetName: 'Tern' };
    expect(changeEntries(two(), { type: 'known', files: [known] }).map(verdict)).toEqual(['known', 'known']);
    expect(isUnfinished(changeEntries(two(), { type: 'known', files: [known] })[0]!)).toBe(false);
  });
});

describe('files of one kind', () => {
  const signature = { format: 'text', columns: ['a', 'b'], instrument: null, telescope: null, writer: [] } as const;
  it('are those that can still be corrected, alike or not told yet', () => {
    const mine = entry({ id: 1, signature });
    const others = [
      entry({ id: 2, signature: { ...signature, columns: ['A', ' b'] } }),
      entry({ id: 3, signature: { ...signature, columns: ['a'] } }),
      entry({ id: 4, read: bad }),
      entry({ id: 5, signature, sending: { at: 'waiting' } }),
    ];
    expect(similarCount(mine, [mine, ...others])).toBe(2);
  });
  it('remember what stood before a recipe, and its name goes with the bytes', () => {
    const own = entry({ corrections: { frame: 'unknown' } });
    const [after] = changeEntries([own], { type: 'corrected', id: 1, corrections: { medium: 'air' }, recipe: 'Plates' });
    expect(after!.recipe).toEqual({ name: 'Plates', before: { frame: 'unknown' } });
    expect(metaOf(after!, [])).toMatchObject({ recipe: 'Plates', corrections: { medium: 'air' } });
    const [undone] = changeEntries([after!], { type: 'corrected', id: 1, corrections: after!.recipe!.before });
    expect([undone!.recipe, undone!.corrections]).toEqual([null, { frame: 'unknown' }]);
  });
});

describe('the target nearest to where a file points', () => {
  const at = (raDeg: number, decDeg: number) => aReading({ pointing: { value: { raDeg, decDeg }, how: 'stated', where: 'RA' } });
  const placed = aTargetSummary({ raDeg: 0.001, decDeg: 60 });
  it('is found across the zero of right ascension, with its distance', () => {
    // 0.002 degrees in right ascension at 60 degrees north are 0.001 degrees on the sky: 3.6 arcsec
    const near = nearestTarget(at(359.999, 60), [aTargetSummary({ id: 'far', raDeg: 180 }), placed])!;
    expect(near.target).toBe(placed);
    expect(near.arcsec).toBeCloseTo(3.6, 3);
  });
  it('is none beyond two arcminutes, or where nothing is known', () => {
    expect(nearestTarget(at(0, 60.1), [placed])).toBeNull();
    expect(nearestTarget(aReading(), [placed])).toBeNull();
    expect(nearestTarget(at(0, 60), [aTargetSummary({ raDeg: null })])).toBeNull();
  });
});

describe('how a fact is known', () => {
  it('stands out when the file does not say it', () => {
    expect(howKnown({ how: 'stated', where: 'TUNIT1' })).toEqual({ words: 'stated, TUNIT1', loud: false });
    expect(howKnown({ how: 'assumed', where: 'range' })).toEqual({ words: 'assumed, range', loud: true });
    expect(howKnown({ how: 'not_stated', where: '' })).toEqual({ words: 'not stated', loud: true });
    expect(howKnown({ how: 'corrected', where: 'correction' })).toEqual({ words: 'said by you', loud: false });
  });
  it('says beside a correction what the file said', () => {
    const said = { value: 'air', how: 'stated', where: '# medium' } as const;
    const words = (one: typeof said | { value: string; how: 'not_stated'; where: string }) =>
      howKnown<string>({ how: 'corrected', where: '', said: one }, (value) => value).words;
    expect(words(said)).toBe('said by you; the file: air');
    expect(words({ value: 'vacuum', how: 'not_stated', where: '' })).toBe('said by you; the file does not say');
  });
  it('a correction is said in words', () => {
    expect(correctionWords({ medium: 'air', uncertaintyColumn: null, axisUnit: 'angstrom' })).toEqual([
      'air',
      'no error column',
      'axis in Å',
    ]);
  });
  it('a correction taken back is no correction', () => {
    expect(withCorrection({ medium: 'air' }, 'medium', undefined)).toEqual({});
    expect(withCorrection({}, 'uncertaintyColumn', null)).toEqual({ uncertaintyColumn: null });
  });
});

describe('sending', () => {
  it('runs so many at a time and starts the next when one ends, however it ends', async () => {
    const queue = makeQueue(2);
    const ends: (() => void)[] = [];
    const started: number[] = [];
    for (const n of [0, 1, 2, 3]) {
      queue(async () => {
        started.push(n);
        await new Promise<void>((resolve) => ends.push(resolve));
        if (n === 0) throw new Error('this one failed');
      });
    }
    expect(started).toEqual([0, 1]);
    ends[0]!();
    await Promise.resolve();
    await new Promise((resolve) => setTimeout(resolve));
    expect(started).toEqual([0, 1, 2]);
  });
});
