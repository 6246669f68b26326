import type { Knex } from 'knex';

/**
 * Kinds of label of a batch, and the stamps that make each: one, or several standing under one another or side by side. Where
 * the whole of them stands in the die's box is kept as the fit gave it or the person moved it; `placed_by` says which.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('batch_lines', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable();
    t.uuid('batch_id').notNullable();
    t.integer('position').notNullable();
    t.text('arrangement').notNullable().defaultTo('under').checkIn(['under', 'beside']);
    t.text('align').notNullable().defaultTo('middle').checkIn(['start', 'middle', 'end']);
    t.double('piece_gap_mm').notNullable().defaultTo(4).checkBetween([0, 1000]);
    t.text('cut').notNullable().defaultTo('die').checkIn(['die', 'straight', 'none']);
    t.uuid('die_id');
    // Around the ink where no die gives the label its size.
    t.double('border_mm').notNullable().defaultTo(5).checkBetween([0, 1000]);
    t.text('placed_by').checkIn(['fit', 'hand']);
    t.double('centre_x_mm');
    t.double('centre_y_mm');
    t.double('rotation_deg');
    t.double('fit_border_mm');
    t.double('fit_bound_mm');
    t.text('fit_verdict').checkIn(['roomy', 'good', 'snug', 'tight', 'no']);
    t.integer('quantity').notNullable().checkBetween([0, 10000]);
    t.integer('overs').notNullable().defaultTo(0).checkBetween([0, 10000]);
    t.uuid('cardstock_id');
    t.boolean('may_turn').notNullable().defaultTo(false);
    t.integer('version').notNullable().defaultTo(1);
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'batch_id', 'position']);
    t.foreign(['studio_id', 'batch_id']).references(['studio_id', 'id']).inTable('batches').onDelete('CASCADE');
    t.foreign(['studio_id', 'die_id']).references(['studio_id', 'id']).inTable('dies');
    t.foreign(['studio_id', 'cardstock_id']).references(['studio_id', 'id']).inTable('cardstocks');
    t.check('(placed_by IS NULL) = (centre_x_mm IS NULL) AND (placed_by IS NULL) = (centre_y_mm IS NULL) AND (placed_by IS NULL) = (rotation_deg IS NULL)', undefined, 'batch_lines_place_whole');
  });
  await knex.schema.createTable('batch_line_pieces', (t) => {
    t.uuid('studio_id').notNullable();
    t.uuid('line_id').notNullable();
    t.integer('position').notNullable();
    t.uuid('sentiment_id').notNullable();
    t.uuid('ink_id');
    t.primary(['line_id', 'position']);
    t.foreign(['studio_id', 'line_id']).references(['studio_id', 'id']).inTable('batch_lines').onDelete('CASCADE');
    t.foreign(['studio_id', 'sentiment_id']).references(['studio_id', 'id']).inTable('sentiments');
    t.foreign(['studio_id', 'ink_id']).references(['studio_id', 'id']).inTable('inks');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_line_pieces');
  await knex.schema.dropTable('batch_lines');
}
