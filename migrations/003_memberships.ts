import type { Knex } from 'knex';

/** Who belongs to which studio, in which role. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('memberships', (t) => {
    t.uuid('studio_id').notNullable().references('studios.id').onDelete('CASCADE');
    t.uuid('person_id').notNullable().references('users.id').onDelete('CASCADE');
    t.text('role').notNullable().checkIn(['owner', 'maker', 'helper']);
    t.timestamp('created_at', { useTz: true }).notNullable().defaultTo(knex.fn.now());
    t.primary(['studio_id', 'person_id']);
    t.index('person_id');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('memberships');
}
