import { Inject, Injectable } from '@nestjs/common';
import {
  MOST_LINES,
  diffLines,
  mergeLines,
  type Line,
  type LineListAnswer,
  type LineListChanges,
  type LineListDetail,
  type LineListPreview,
  type LineListSummary,
  type LineQuery,
  type Page,
  type ParsedLines,
} from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { checked } from '../../common/errors/validation.js';
import { Turnstile } from '../../common/turnstile.js';
import type { Scope } from '../../common/scope.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { NewLineListDto } from './dto/line-list.dto.js';
import { loadLineList } from './line-list-store.js';
import { findLinePage, findProgrammeLists, findUses, insertProgrammeList, setArchived } from './line-lists.repository.js';
import { parseInThread } from './parse-in-thread.js';

/** Rows that a preview shows of each kind. */
const SHOWN = 100;

@Injectable()
export class LineListsService {
  private readonly parsers = new Turnstile(1);

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  list(scope: Scope): Promise<LineListSummary[]> {
    return findProgrammeLists(this.db, scope);
  }

  async get(scope: Scope, id: string): Promise<LineListDetail> {
    return { ...(await this.summary(scope, id)), ...(await findUses(this.db, scope, id)) };
  }

  async lines(scope: Scope, id: string, query: LineQuery): Promise<Page<Line>> {
    await this.summary(scope, id);
    return findLinePage(this.db, id, query);
  }

  /** How list `id` differs from list `other`, which came before. */
  async diff(scope: Scope, id: string, other: string): Promise<LineListChanges> {
    await Promise.all([this.summary(scope, id), this.summary(scope, other)]);
    const [after, before] = await Promise.all([loadLineList(this.db, id), loadLineList(this.db, other)]);
    return changesOf(before.lines, after.lines);
  }

  /** Reads a file of lines, shows what would be stored, and stores it unless it is a dry run or anything is wrong with it. */
  async add(actor: Actor, scope: Scope, file: Buffer | undefined, meta: unknown): Promise<LineListAnswer> {
    if (!file?.length) throw invalid('/file', 'must be a file that is not empty');
    const wanted = checked(NewLineListDto, parsedJson(meta), '/meta');
    const previous = wanted.previousId === undefined ? null : await this.summary(scope, wanted.previousId);
    if (previous && !previous.own) throw invalid('/meta/previousId', 'is a shared list; start a list of the programme from it instead');
    const name = previous?.name ?? wanted.name;
    const base = wanted.baseId === undefined ? null : await this.linesOf(scope, wanted.baseId);
    const parsed = await this.parsers.pass(() => parseInThread(file, wanted, this.config));
    const lines = base ? mergeLines(without(base, wanted.remove ?? []), parsed.lines) : parsed.lines;
    if (lines.length > MOST_LINES) throw invalid('/file', `would make a list of ${lines.length} lines; ${MOST_LINES} are allowed`);
    const before = base ?? (previous ? await this.linesOf(scope, previous.id) : null);
    const preview = previewOf(parsed, lines, before);
    if (wanted.dryRun) return { preview, list: null };
    if (preview.problemCount > 0) throw faulty(parsed);
    const id = await asMember(this.db, actor, scope.programmeId, 'lead', async (trx) => {
      const { version, citation = '' } = wanted;
      const made = await insertProgrammeList(trx, scope, {
        name,
        version,
        citation,
        previousId: previous?.id ?? null,
        userId: actor.userId,
        lines,
      });
      const facts = { name, version, lines: lines.length, previousId: previous?.id ?? null, changes: preview.diff?.counts ?? null };
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'line_list_added', subject: made, facts });
      return made;
    });
    return { preview, list: await this.summary(scope, id) };
  }

  /** Only an own list; what rests on it keeps it. */
  async archive(actor: Actor, scope: Scope, id: string, archived: boolean): Promise<LineListSummary> {
    await asMember(this.db, actor, scope.programmeId, 'lead', async (trx) => {
      const list = await this.summary(scope, id);
      if (!list.own) throw new DomainError('bad_transition', 'A shared list stays on offer for every programme.');
      await setArchived(trx, scope, id, archived);
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'line_list_archived', subject: id, facts: { archived } });
    });
    return this.summary(scope, id);
  }

  /** Every line of a list with the list's own name. */
  async whole(scope: Scope, id: string): Promise<{ list: LineListSummary; lines: readonly Line[] }> {
    return { list: await this.summary(scope, id), lines: await this.linesOf(scope, id) };
  }

  private async summary(scope: Scope, id: string): Promise<LineListSummary> {
    const [list] = await findProgrammeLists(this.db, scope, id);
    if (!list) throw notFound();
    return list;
  }

  private async linesOf(scope: Scope, id: string): Promise<readonly Line[]> {
    await this.summary(scope, id);
    return (await loadLineList(this.db, id)).lines;
  }
}

const invalid = (pointer: string, detail: string) =>
  new DomainError('invalid_request', `${pointer} ${detail}`, { errors: [{ pointer, detail }] });

function faulty({ problems, problemCount }: ParsedLines): DomainError {
  const errors = problems.map(({ row, column, sentence }) => ({ pointer: `/file/${row}`, detail: `row ${row}, ${column}: ${sentence}` }));
  return new DomainError(
    'invalid_request',
    `${problemCount} rows of the list are faulty, so nothing was stored. ${errors[0]?.detail ?? ''}`,
    { errors },
  );
}

function parsedJson(meta: unknown): unknown {
  try {
    return JSON.parse(typeof meta === 'string' ? meta : 'null');
  } catch {
    throw invalid('/meta', 'must be JSON');
  }
}

function without(lines: readonly Line[], ids: readonly string[]): Line[] {
  const gone = new Set(ids);
  return lines.filter(({ id }) => !gone.has(id));
}

function previewOf(parsed: ParsedLines, lines: readonly Line[], before: readonly Line[] | null): LineListPreview {
  const { problems, problemCount, notes } = parsed;
  return {
    lines: lines.length,
    first: parsed.lines.slice(0, 20),
    problems: [...problems],
    problemCount,
    notes: [...notes],
    diff: before && changesOf(before, lines),
  };
}

function changesOf(before: readonly Line[], after: readonly Line[]): LineListChanges {
  const { added, removed, changed, unchanged } = diffLines(before, after);
  return {
    added: added.slice(0, SHOWN),
    removed: removed.slice(0, SHOWN),
    changed: changed.slice(0, SHOWN),
    counts: { added: added.length, removed: removed.length, changed: changed.length, unchanged },
  };
}
