import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('cardstocks', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.double('width_mm').notNullable();
    t.double('height_mm').notNullable();
    t.text('colour').notNullable();
    t.integer('on_hand').notNullable();
    t.text('grain').notNullable().checkIn(['along-width', 'along-height', 'unknown']);
    t.double('weight_gsm');
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
    t.check('width_mm > 0 AND width_mm <= 1000 AND height_mm > 0 AND height_mm <= 1000');
    t.check('on_hand >= 0');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('cardstocks');
}
