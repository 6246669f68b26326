import type { Knex } from 'knex';

/** Queued work as people see it; the queue itself only carries ids. `attempt` tells a worker's run from an earlier one's. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('jobs', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.uuid('person_id').notNullable().references('users.id').onDelete('CASCADE');
    t.text('kind').notNullable();
    t.uuid('subject_id');
    t.text('singleton_key');
    t.jsonb('payload').notNullable();
    t.text('state').notNullable().defaultTo('queued').checkIn(['queued', 'running', 'done', 'failed', 'cancelled']);
    t.integer('attempt').notNullable().defaultTo(0);
    t.double('progress').notNullable().defaultTo(0);
    t.text('stage').notNullable().defaultTo('');
    t.jsonb('result');
    t.jsonb('error');
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('finished_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'subject_id']);
  });
  await knex.raw(`CREATE UNIQUE INDEX jobs_singleton ON jobs (studio_id, singleton_key) WHERE singleton_key IS NOT NULL AND state IN ('queued', 'running')`);
  await knex.raw(`CREATE INDEX jobs_open ON jobs (state) WHERE state IN ('queued', 'running')`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('jobs');
}
