import type { Knex } from 'knex';

/**
 * Plans of a batch, numbered. One that was printed or stamped from (`used_at`) is never touched again; until then the next
 * planning takes its place and number. A plan holds one run a cardstock, each with its order and plan as the planner takes and gives
 * them and with the names of everything in it, so that it reads the same whatever becomes of the sentiments and dies.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('plans', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('batch_id').notNullable();
    t.integer('number').notNullable();
    t.timestamp('used_at', { useTz: true });
    t.text('made_how').notNullable().checkIn(['planned', 'around-pins', 'by-hand', 'alternative']);
    t.text('made_by').notNullable().defaultTo('');
    t.integer('content_version').notNullable();
    t.jsonb('totals').notNullable();
    t.jsonb('at_least').notNullable();
    t.integer('labels').notNullable();
    t.boolean('stopped').notNullable();
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.unique(['studio_id', 'id']);
    t.unique(['batch_id', 'number']);
    t.foreign(['studio_id', 'batch_id']).references(['studio_id', 'id']).inTable('batches').onDelete('CASCADE');
  });
  await knex.schema.createTable('plan_runs', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('plan_id').notNullable();
    t.integer('position').notNullable();
    t.uuid('cardstock_id');
    t.jsonb('order').notNullable();
    t.jsonb('plan').notNullable();
    t.jsonb('names').notNullable();
    // Lines that never reached the planner, with the reason.
    t.jsonb('left_out').notNullable().defaultTo('[]');
    // In plain words. The other plans that were found, for other aims.
    t.jsonb('explanations').notNullable().defaultTo('[]');
    t.jsonb('alternatives').notNullable().defaultTo('[]');
    t.unique(['studio_id', 'id']);
    t.unique(['plan_id', 'position']);
    t.foreign(['studio_id', 'plan_id']).references(['studio_id', 'id']).inTable('plans').onDelete('CASCADE');
    t.foreign(['studio_id', 'cardstock_id']).references(['studio_id', 'id']).inTable('cardstocks');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('plan_runs');
  await knex.schema.dropTable('plans');
}
