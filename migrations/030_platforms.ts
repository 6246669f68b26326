import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('platforms', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.double('width_mm').notNullable();
    t.double('height_mm').notNullable();
    t.text('corner').notNullable().checkIn(['top-left', 'top-right', 'bottom-left', 'bottom-right']);
    t.text('hinge').notNullable().checkIn(['left', 'right', 'top', 'bottom']);
    // Null: as it follows from corner and hinge; null: the whole bed.
    t.specificType('open_sides', 'text[]');
    t.jsonb('lid');
    t.jsonb('keep_outs').notNullable().defaultTo('[]');
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
    t.check('width_mm > 0 AND width_mm <= 1000 AND height_mm > 0 AND height_mm <= 1000');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('platforms');
}
