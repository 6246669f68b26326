import type { Knex } from 'knex';

/** How many cards, on what they are stamped and with which gear. Platform and printer may be gone to the bin; the batch still names them. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('batches', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.text('state').notNullable().defaultTo('chosen').checkIn(['chosen', 'planned', 'printed', 'stamping', 'finished']);
    t.integer('designs').notNullable().checkBetween([1, 1000]);
    t.integer('people').notNullable().checkBetween([1, 1000]);
    t.integer('spares').notNullable().defaultTo(0).checkBetween([0, 1000]);
    t.uuid('platform_id');
    t.uuid('printer_id');
    t.double('sheet_width_mm').notNullable();
    t.double('sheet_height_mm').notNullable();
    t.double('margin_mm').notNullable();
    t.double('gap_mm').notNullable();
    t.double('turn_tolerance_mm').notNullable();
    t.double('max_feed_width_mm').checkPositive();
    t.text('turns').notNullable().defaultTo('auto').checkIn(['auto', 'none', 'half', 'quarter']);
    t.text('aim').notNullable().defaultTo('time').checkIn(['time', 'sheets']);
    // The planning under way or the last one; whether a person asked it to end with the best so far.
    t.uuid('plan_job_id');
    t.boolean('plan_stop_asked').notNullable().defaultTo(false);
    t.integer('version').notNullable().defaultTo(1);
    // Goes up with every change that a plan would feel, of the batch or of its lines.
    t.integer('content_version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.foreign(['studio_id', 'platform_id']).references(['studio_id', 'id']).inTable('platforms');
    t.foreign(['studio_id', 'printer_id']).references(['studio_id', 'id']).inTable('printers');
    t.index(['studio_id', 'deleted_at', 'updated_at']);
    t.check('sheet_width_mm > 0 AND sheet_width_mm <= 1000 AND sheet_height_mm > 0 AND sheet_height_mm <= 1000');
    t.check('least(margin_mm, gap_mm, turn_tolerance_mm) >= 0');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batches');
}
