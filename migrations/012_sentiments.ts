import type { Knex } from 'knex';

/**
 * Sentiments of a set. Those of a picture are tied to their place in it (`place`, shares of its width and height), so that
 * name, words and edits outlive another grouping, reading or picture. One that the grouping at hand does not give is kept
 * with `present` false: it comes back as it was when the join or split is undone.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('sentiments', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('stamp_set_id').notNullable();
    t.uuid('reading_id');
    t.jsonb('place');
    t.boolean('present').notNullable().defaultTo(true);
    t.integer('number').notNullable();
    t.text('name').notNullable().defaultTo('');
    t.text('words').notNullable().defaultTo('');
    t.text('words_by').checkIn(['person', 'recognised']);
    t.specificType('tags', 'text[]').notNullable().defaultTo('{}');
    t.text('tags_by').checkIn(['person', 'recognised']);
    t.double('width_mm').checkPositive();
    t.double('height_mm').checkPositive();
    t.jsonb('artwork');
    t.boolean('outlined').notNullable().defaultTo(true);
    t.double('angle_deg').notNullable().defaultTo(0);
    t.double('upright_deg');
    t.double('ink_area_mm2').checkPositive();
    t.double('thinnest_stroke_mm');
    t.double('trim_mm').notNullable().defaultTo(1).checkBetween([0, 1000]);
    t.integer('owned').notNullable().defaultTo(1).checkBetween([0, 99]);
    t.boolean('set_aside').notNullable().defaultTo(false);
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.foreign(['studio_id', 'stamp_set_id']).references(['studio_id', 'id']).inTable('stamp_sets').onDelete('CASCADE');
    t.foreign(['studio_id', 'reading_id']).references(['studio_id', 'id']).inTable('readings').onDelete('CASCADE');
    t.index(['studio_id', 'stamp_set_id']);
    t.index(['studio_id', 'reading_id']);
    t.index(['tags'], 'sentiments_tags', { indexType: 'GIN' });
    t.check('(artwork IS NULL) = (width_mm IS NULL) AND (width_mm IS NULL) = (height_mm IS NULL)', undefined, 'sentiments_size_whole');
    t.check('(reading_id IS NULL) = (place IS NULL)', undefined, 'sentiments_place_in_picture');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('sentiments');
}
