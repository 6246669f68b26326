import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('stamp_sets', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('mount').notNullable().defaultTo('clear').checkIn(['clear', 'cling', 'wood']);
    t.text('storage_place').notNullable().defaultTo('');
    t.text('note').notNullable().defaultTo('');
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('stamp_sets');
}
