import type { Knex } from 'knex';

/** Nested sets of dies. A die's geometry is JSON as the fit kernel takes it; what is listed and sorted stands beside it. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('die_sets', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
  });
  await knex.schema.createTable('dies', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('die_set_id').notNullable();
    t.text('name').notNullable();
    t.jsonb('geometry').notNullable();
    /** Box of the cut line. */
    t.double('width_mm').notNullable().checkPositive();
    t.double('height_mm').notNullable().checkPositive();
    t.double('area_mm2').notNullable().checkPositive();
    t.integer('owned').notNullable().defaultTo(1).checkBetween([0, 99]);
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.foreign(['studio_id', 'die_set_id']).references(['studio_id', 'id']).inTable('die_sets').onDelete('CASCADE');
    t.index(['studio_id', 'die_set_id']);
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('dies');
  await knex.schema.dropTable('die_sets');
}
