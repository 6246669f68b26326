import type { Knex } from 'knex';

/**
 * What lies in file storage. A row is made before the bytes are written, so that no file is without one; files that no
 * column named `…file_key` points to are swept after a day.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('files', (t) => {
    t.text('key').primary();
    t.text('media_type').notNullable();
    t.bigInteger('size_bytes').notNullable();
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.index('created_at');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('files');
}
