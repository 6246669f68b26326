import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('inks', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.text('kind').notNullable().checkIn(['dye', 'pigment', 'hybrid', 'solvent']);
    t.text('colour').notNullable();
    t.double('drying_minutes').notNullable();
    t.double('clear_mm').notNullable();
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
    t.check('drying_minutes >= 0 AND clear_mm >= 0');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('inks');
}
