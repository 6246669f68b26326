import type { Knex } from 'knex';

/** What happened to access: sign-ins, roles, deletions, shares. Rows are added, never changed. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('audit_events', (t) => {
    t.bigIncrements('id');
    t.uuid('studio_id').references('studios.id').onDelete('CASCADE');
    t.uuid('person_id').references('users.id').onDelete('SET NULL');
    t.text('action').notNullable();
    /** Whom or what it was done to, in words. */
    t.text('about');
    t.jsonb('details').notNullable().defaultTo('{}');
    t.text('address');
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.index(['studio_id', 'id']);
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('audit_events');
}
