import type { Knex } from 'knex';

/** What happened at the table: presses made, what became of each label, cut passes done. By whom and when, kept with the name as it was. */
export async function up(knex: Knex): Promise<void> {
  const common = (t: Knex.CreateTableBuilder) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('batch_id').notNullable();
    t.uuid('plan_id').notNullable();
    /** Of the plan's runs: one a cardstock. */
    t.uuid('run_id').notNullable();
    t.timestamp('done_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.text('done_by').notNullable();
    t.foreign(['studio_id', 'batch_id']).references(['studio_id', 'id']).inTable('batches').onDelete('CASCADE');
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'batch_id']);
  };
  await knex.schema.createTable('presses', (t) => {
    common(t);
    /** Counted from 1 through the run. */
    t.integer('number').notNullable().checkPositive();
    /** Of the request that made it: a retry finds it done. */
    t.text('idempotency_key');
    t.unique(['studio_id', 'run_id', 'number']);
  });
  await knex.schema.createTable('impressions', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('press_id').notNullable();
    t.integer('placement').notNullable();
    t.text('line_id').notNullable();
    t.text('outcome').notNullable().checkIn(['clean', 'missed', 'smudged', 'skipped']);
    t.integer('restamps').notNullable().defaultTo(0).checkBetween([0, 99]);
    t.text('reason').notNullable().defaultTo('');
    t.text('note').notNullable().defaultTo('');
    t.timestamp('changed_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.text('changed_by').notNullable();
    t.foreign(['studio_id', 'press_id']).references(['studio_id', 'id']).inTable('presses').onDelete('CASCADE');
    t.unique(['studio_id', 'press_id', 'placement']);
  });
  await knex.schema.createTable('cut_passes', (t) => {
    common(t);
    /** Counted from 1 through the run. */
    t.integer('number').notNullable().checkPositive();
    t.unique(['studio_id', 'run_id', 'number']);
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('cut_passes');
  await knex.schema.dropTable('impressions');
  await knex.schema.dropTable('presses');
}
