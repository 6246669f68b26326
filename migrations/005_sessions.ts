import type { Knex } from 'knex';

/**
 * Sign-ins, as the session store writes them. Whose they are and their public id are read from the stored JSON by the
 * database itself, so that deleting an account ends its sessions and nobody has to keep two places in step.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    CREATE TABLE sessions (
      sid text PRIMARY KEY,
      sess json NOT NULL,
      expire timestamp(6) NOT NULL,
      person_id uuid GENERATED ALWAYS AS ((sess ->> 'personId')::uuid) STORED REFERENCES users (id) ON DELETE CASCADE,
      public_id uuid GENERATED ALWAYS AS ((sess ->> 'publicId')::uuid) STORED
    )`);
  await knex.raw('CREATE INDEX sessions_expire ON sessions (expire)');
  await knex.raw('CREATE INDEX sessions_person ON sessions (person_id)');
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('sessions');
}
