import type { Knex } from 'knex';

/**
 * Line lists of a programme beside the shared ones. A version is never changed: an edit makes a new row that names the one it came from.
 * Names are used once among the shared lists, and once in each programme.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.alterTable('line_lists', (t) => {
    t.uuid('programme_id').references('programmes.id').onDelete('CASCADE').index();
    t.text('citation').notNullable().defaultTo('');
    t.uuid('previous_id').references('line_lists.id');
    t.uuid('created_by').references('users.id');
    t.timestamp('archived_at');
    t.dropUnique(['name', 'version']);
    t.check(
      'char_length(name) between 1 and 120 and char_length(version) between 1 and 40 and char_length(citation) <= 1000',
      [],
      'line_lists_words',
    );
    t.check('not is_default or (programme_id is null and archived_at is null)', [], 'line_lists_default_is_shared');
  });
  await db.raw(`
    create unique index line_lists_name_version_once
    on line_lists (coalesce(programme_id, '00000000-0000-0000-0000-000000000000'), lower(name), version)`);
  await db.raw('create index lines_species on lines (line_list_id, species, wavelength_nm)');
  await db.raw(`
    create trigger lines_only_come before update on lines for each statement execute function refuse_change()`);
}

export async function down(db: Knex): Promise<void> {
  await db.raw('drop trigger lines_only_come on lines');
  await db.raw('drop index lines_species');
  await db.raw('drop index line_lists_name_version_once');
  await db('line_lists').whereNotNull('programme_id').delete();
  await db.schema.alterTable('line_lists', (t) => {
    t.dropChecks(['line_lists_words', 'line_lists_default_is_shared']);
    t.dropColumns('programme_id', 'citation', 'previous_id', 'created_by', 'archived_at');
    t.unique(['name', 'version']);
  });
}
