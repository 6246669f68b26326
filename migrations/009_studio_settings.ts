import type { Knex } from 'knex';

/** One row a studio. Lengths mm, times minutes; the defaults are those of the planner and the fit table. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('studio_settings', (t) => {
    t.uuid('studio_id').primary().references('studios.id').onDelete('CASCADE');
    t.integer('version').notNullable().defaultTo(1);
    t.text('unit').notNullable().defaultTo('mm').checkIn(['mm', 'in']);
    t.double('good_mm').notNullable().defaultTo(3);
    t.double('snug_mm').notNullable().defaultTo(1.5);
    t.double('pace_setup').notNullable().defaultTo(4);
    t.double('pace_per_stamp').notNullable().defaultTo(1 / 3);
    t.double('pace_press').notNullable().defaultTo(1 / 2);
    t.double('pace_per_inked').notNullable().defaultTo(8 / 60);
    t.double('pace_cut_pass').notNullable().defaultTo(3 / 4);
    t.double('gap_mm').notNullable().defaultTo(3);
    t.double('margin_mm').notNullable().defaultTo(5);
    t.double('turn_tolerance_mm').notNullable().defaultTo(1);
    t.double('trim_mm').notNullable().defaultTo(1.5);
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.check('good_mm >= snug_mm AND snug_mm >= 0', undefined, 'studio_settings_limits');
    t.check('least(gap_mm, margin_mm, turn_tolerance_mm, trim_mm, pace_setup, pace_per_stamp, pace_press, pace_per_inked, pace_cut_pass) >= 0', undefined, 'studio_settings_not_negative');
  });
  await knex.schema.createTable('rate_limits', (t) => {
    t.string('key', 255).primary();
    t.integer('points').notNullable().defaultTo(0);
    t.bigInteger('expire');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('rate_limits');
  await knex.schema.dropTable('studio_settings');
}
