import type { Knex } from 'knex';

/**
 * A picture of a stamp set and what was read in it. `reading` is as the picture alone gives it; scale, grouping gap and
 * corrections stand beside it and are applied by the grouping kernel, so that every one of them can be undone.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('readings', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('stamp_set_id').notNullable();
    t.integer('position').notNullable();
    t.text('file_key').notNullable();
    t.text('file_name').notNullable();
    /** The picture turned upright, as browsers can show it, and a small one for cards. */
    t.text('view_file_key');
    t.text('small_file_key');
    t.integer('width_px').notNullable().checkPositive();
    t.integer('height_px').notNullable().checkPositive();
    t.boolean('mirrored').notNullable().defaultTo(false);
    t.boolean('looks_mirrored').notNullable().defaultTo(false);
    t.jsonb('scale').notNullable();
    /** 'auto', or mm, or px while there is no scale. */
    t.jsonb('grouping_gap').notNullable();
    t.jsonb('corrections').notNullable();
    t.jsonb('reading');
    t.text('state').notNullable().defaultTo('waiting').checkIn(['waiting', 'read', 'failed']);
    t.jsonb('error');
    t.uuid('job_id');
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.foreign(['studio_id', 'stamp_set_id']).references(['studio_id', 'id']).inTable('stamp_sets').onDelete('CASCADE');
    t.index(['studio_id', 'stamp_set_id']);
    t.check(`state <> 'read' OR reading IS NOT NULL`, undefined, 'readings_read_has_reading');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('readings');
}
