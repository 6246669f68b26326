import type { Knex } from 'knex';

/** What the bench counts by: setups numbered through the whole plan, and the places in them with the lines made there. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('setups', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('plan_id').notNullable();
    t.uuid('run_id').notNullable();
    t.integer('number').notNullable();
    // In the run's plan, from 0.
    t.integer('position').notNullable();
    t.integer('turns').notNullable();
    t.integer('presses').notNullable();
    t.integer('sheets').notNullable();
    t.unique(['studio_id', 'id']);
    t.unique(['plan_id', 'number']);
    t.check('turns IN (1, 2, 4)');
    t.foreign(['studio_id', 'plan_id']).references(['studio_id', 'id']).inTable('plans').onDelete('CASCADE');
    t.foreign(['studio_id', 'run_id']).references(['studio_id', 'id']).inTable('plan_runs').onDelete('CASCADE');
  });
  await knex.schema.createTable('placements', (t) => {
    t.uuid('studio_id').notNullable();
    t.uuid('setup_id').notNullable();
    // The planner's own number in the setup.
    t.integer('number').notNullable();
    t.double('x_mm').notNullable();
    t.double('y_mm').notNullable();
    t.double('rotation_deg').notNullable();
    t.primary(['setup_id', 'number']);
    t.foreign(['studio_id', 'setup_id']).references(['studio_id', 'id']).inTable('setups').onDelete('CASCADE');
  });
  await knex.schema.createTable('placement_lines', (t) => {
    t.uuid('studio_id').notNullable();
    t.uuid('setup_id').notNullable();
    t.integer('number').notNullable();
    // The batch's line as it was; the line itself may be gone since.
    t.uuid('line_id').notNullable();
    t.integer('labels').notNullable();
    t.primary(['setup_id', 'number', 'line_id']);
    t.foreign(['studio_id', 'setup_id']).references(['studio_id', 'id']).inTable('setups').onDelete('CASCADE');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('placement_lines');
  await knex.schema.dropTable('placements');
  await knex.schema.dropTable('setups');
}
