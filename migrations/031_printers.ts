import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('printers', (t) => {
    t.uuid('id').primary();
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('note').notNullable().defaultTo('');
    t.double('paper_width_mm').notNullable();
    t.double('paper_height_mm').notNullable();
    for (const side of ['left', 'right', 'top', 'bottom']) t.double(`unprintable_${side}_mm`).notNullable();
    t.double('scale_x').notNullable().defaultTo(1);
    t.double('scale_y').notNullable().defaultTo(1);
    t.double('shift_x_mm').notNullable().defaultTo(0);
    t.double('shift_y_mm').notNullable().defaultTo(0);
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('updated_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.timestamp('deleted_at', { useTz: true });
    t.unique(['studio_id', 'id']);
    t.index(['studio_id', 'deleted_at', 'name']);
    t.check('paper_width_mm > 0 AND paper_width_mm <= 1000 AND paper_height_mm > 0 AND paper_height_mm <= 1000');
    t.check('unprintable_left_mm >= 0 AND unprintable_right_mm >= 0 AND unprintable_left_mm + unprintable_right_mm < paper_width_mm');
    t.check('unprintable_top_mm >= 0 AND unprintable_bottom_mm >= 0 AND unprintable_top_mm + unprintable_bottom_mm < paper_height_mm');
    t.check('scale_x BETWEEN 0.9 AND 1.1 AND scale_y BETWEEN 0.9 AND 1.1');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('printers');
}
