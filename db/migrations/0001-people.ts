import type { MigrationInterface, QueryRunner } from 'typeorm';

/** People, firms, sessions, authority, and the audit trail with its seals. */
export class People1000000000001 implements MigrationInterface {
  name = 'People1000000000001';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`
      CREATE TABLE broker_firms (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        name text NOT NULL UNIQUE CHECK (length(trim(name)) > 0),
        created_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE TABLE contacts (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        firm_id uuid NOT NULL REFERENCES broker_firms,
        name text NOT NULL CHECK (length(trim(name)) > 0),
        email text NOT NULL CHECK (email = lower(email)),
        created_at timestamptz NOT NULL DEFAULT now(),
        UNIQUE (firm_id, email)
      );
      CREATE TABLE cedants (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        name text NOT NULL UNIQUE CHECK (length(trim(name)) > 0),
        territory text NOT NULL,
        created_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE TABLE people (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        name text NOT NULL CHECK (length(trim(name)) > 0),
        email text NOT NULL UNIQUE CHECK (email = lower(email)),
        role text NOT NULL CHECK (role IN ('underwriter', 'senior underwriter', 'actuary', 'broker', 'administrator')),
        firm_id uuid REFERENCES broker_firms,
        password_hash text NOT NULL,
        active boolean NOT NULL DEFAULT true,
        version integer NOT NULL DEFAULT 1,
        created_at timestamptz NOT NULL DEFAULT now(),
        CHECK ((role = 'broker') = (firm_id IS NOT NULL))
      );
      CREATE TABLE sessions (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        person_id uuid NOT NULL REFERENCES people,
        client text NOT NULL CHECK (client IN ('browser', 'bearer')),
        refresh_hash bytea NOT NULL UNIQUE,
        previous_refresh_hash bytea,
        rotated_at timestamptz NOT NULL DEFAULT now(),
        created_at timestamptz NOT NULL DEFAULT now(),
        expires_at timestamptz NOT NULL,
        ended_at timestamptz
      );
      CREATE INDEX sessions_person ON sessions (person_id);
      CREATE INDEX sessions_previous ON sessions (previous_refresh_hash);
      CREATE TABLE sign_in_attempts (
        account_hash bytea PRIMARY KEY,
        failures integer NOT NULL DEFAULT 0,
        last_failed_at timestamptz NOT NULL DEFAULT now(),
        locked_until timestamptz
      );
      CREATE TABLE grants (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        person_id uuid NOT NULL REFERENCES people,
        granted_by uuid NOT NULL REFERENCES people,
        largest_line_amount numeric(20,4) NOT NULL CHECK (largest_line_amount >= 0),
        largest_line_share numeric(9,8) NOT NULL CHECK (largest_line_share BETWEEN 0 AND 1),
        lowest_adequacy numeric(8,6) NOT NULL CHECK (lowest_adequacy >= 0),
        below_walk_away boolean NOT NULL DEFAULT false,
        starts_on date NOT NULL,
        ends_on date NOT NULL,
        ended_at timestamptz,
        created_at timestamptz NOT NULL DEFAULT now(),
        CHECK (starts_on <= ends_on),
        CHECK (person_id <> granted_by)
      );
      CREATE INDEX grants_person ON grants (person_id);

      -- Appended to by everyone, changed by no one: db/grants.ts leaves the application INSERT and SELECT only.
      CREATE TABLE audit_entries (
        id bigint GENERATED ALWAYS AS IDENTITY PRIMARY KEY,
        at timestamptz NOT NULL DEFAULT clock_timestamp(),
        xact xid8 NOT NULL DEFAULT pg_current_xact_id(),
        actor_id uuid,
        actor text NOT NULL,
        action text NOT NULL,
        subject text NOT NULL,
        subject_id text,
        from_state text,
        to_state text,
        note text
      );
      CREATE INDEX audit_entries_subject ON audit_entries (subject_id, id);
      -- One seal an entry, in commit order: hash = sha256(previous hash || the entry). Written by the sealer's role alone.
      CREATE TABLE audit_seals (
        position bigint PRIMARY KEY CHECK (position > 0),
        entry_id bigint NOT NULL UNIQUE REFERENCES audit_entries,
        hash bytea NOT NULL CHECK (length(hash) = 32),
        sealed_at timestamptz NOT NULL DEFAULT clock_timestamp()
      );
    `);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query(
      'DROP TABLE audit_seals, audit_entries, grants, sign_in_attempts, sessions, people, cedants, contacts, broker_firms',
    );
  }
}
