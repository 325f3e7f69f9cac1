import type { MigrationInterface, QueryRunner } from 'typeorm';

/** House bases, zones, the book, programmes, runs, the outbox and the mails. */
export class Pricing1000000000003 implements MigrationInterface {
  name = 'Pricing1000000000003';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`
      CREATE TABLE bases (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        number integer NOT NULL UNIQUE CHECK (number > 0),
        state text NOT NULL DEFAULT 'draft' CHECK (state IN ('draft', 'released', 'retired')),
        terms jsonb NOT NULL,
        created_by uuid NOT NULL REFERENCES people,
        created_at timestamptz NOT NULL DEFAULT now(),
        released_by uuid REFERENCES people,
        released_at timestamptz
      );
      CREATE UNIQUE INDEX bases_one_released ON bases ((true)) WHERE state = 'released';
      CREATE TABLE zones (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        name text NOT NULL UNIQUE,
        perils text[] NOT NULL CHECK (cardinality(perils) > 0),
        regions text[] NOT NULL CHECK (cardinality(regions) > 0),
        -- House currency. Taking capacity locks the zone rows in id order.
        capacity numeric(20,4) NOT NULL CHECK (capacity >= 0)
      );

      CREATE TABLE programmes (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        submission_id uuid NOT NULL REFERENCES submissions,
        terms jsonb NOT NULL,
        version integer NOT NULL DEFAULT 1,
        updated_by uuid NOT NULL REFERENCES people,
        updated_at timestamptz NOT NULL DEFAULT now(),
        created_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE INDEX programmes_submission ON programmes (submission_id);

      -- One row, locked to move the book on: versions are consecutive.
      CREATE TABLE book_head (
        single boolean PRIMARY KEY DEFAULT true CHECK (single),
        version integer NOT NULL
      );
      CREATE TABLE book_versions (
        number integer PRIMARY KEY CHECK (number >= 0),
        cause text NOT NULL,
        contract_id uuid,
        at timestamptz NOT NULL DEFAULT now()
      );
      INSERT INTO book_versions (number, cause) VALUES (0, 'empty book');
      INSERT INTO book_head (version) VALUES (0);
      CREATE TABLE contracts (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        name text NOT NULL,
        cedant_id uuid NOT NULL REFERENCES cedants,
        broker_firm_id uuid NOT NULL REFERENCES broker_firms,
        currency char(3) NOT NULL,
        inception_on date NOT NULL,
        expires_on date NOT NULL,
        origin text NOT NULL CHECK (origin IN ('opening book', 'bound quote')),
        quote_id uuid UNIQUE,
        -- The programme it came from, or that it is the expiring contract of: left out when that one is priced.
        programme_id uuid REFERENCES programmes,
        loss_table_ids uuid[] NOT NULL CHECK (cardinality(loss_table_ids) > 0),
        entered_in integer NOT NULL REFERENCES book_versions,
        left_in integer REFERENCES book_versions,
        CHECK (expires_on > inception_on),
        CHECK (left_in IS NULL OR left_in > entered_in),
        CHECK ((origin = 'bound quote') = (quote_id IS NOT NULL))
      );
      CREATE TABLE contract_layers (
        contract_id uuid NOT NULL REFERENCES contracts,
        position integer NOT NULL,
        layer_key text NOT NULL,
        name text NOT NULL,
        limit_amount numeric(20,4) NOT NULL CHECK (limit_amount > 0),
        attachment numeric(20,4) NOT NULL CHECK (attachment >= 0),
        annual_deductible numeric(20,4) NOT NULL DEFAULT 0 CHECK (annual_deductible >= 0),
        reinstatements double precision[] NOT NULL CHECK (cardinality(reinstatements) <= 5),
        brokerage numeric(9,8) NOT NULL CHECK (brokerage BETWEEN 0 AND 1),
        signed_line numeric(9,8) NOT NULL CHECK (signed_line > 0 AND signed_line <= 1),
        -- For 100%, in the contract's currency.
        premium numeric(20,4) NOT NULL CHECK (premium > 0),
        -- What notified losses have left of the layer's cover, for 100%; null when untouched.
        remaining_limit numeric(20,4) CHECK (remaining_limit >= 0),
        PRIMARY KEY (contract_id, position)
      );

      CREATE TABLE runs (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        programme_id uuid NOT NULL REFERENCES programmes,
        programme_version integer NOT NULL,
        terms jsonb NOT NULL,
        state text NOT NULL DEFAULT 'queued'
          CHECK (state IN ('queued', 'running', 'cancelling', 'cancelled', 'succeeded', 'failed')),
        states integer NOT NULL CHECK (states BETWEEN 10000 AND 1000000),
        basis_id uuid NOT NULL REFERENCES bases,
        book_version integer NOT NULL REFERENCES book_versions,
        -- Catalogue versions and loss table versions used, with their content hashes.
        inputs jsonb NOT NULL,
        input_hash text NOT NULL CHECK (input_hash ~ '^[0-9a-f]{64}$'),
        engine_version text NOT NULL,
        -- Fencing: each attempt of a worker raises it, and only the holder of the current one may write.
        attempt integer NOT NULL DEFAULT 0,
        progress jsonb NOT NULL DEFAULT '{"done": 0, "total": 1, "doing": "waiting for a worker"}',
        heartbeat_at timestamptz,
        error text,
        result jsonb,
        result_hash text CHECK (result_hash ~ '^[0-9a-f]{64}$'),
        -- Set when the desk itself re-prices a quote that the book has overtaken.
        reprices_quote_id uuid,
        idempotency_key text,
        started_by uuid NOT NULL REFERENCES people,
        created_at timestamptz NOT NULL DEFAULT now(),
        started_at timestamptz,
        ended_at timestamptz,
        UNIQUE (started_by, idempotency_key),
        CHECK ((state = 'succeeded') = (result IS NOT NULL AND result_hash IS NOT NULL))
      );
      CREATE INDEX runs_programme ON runs (programme_id, created_at DESC);
      CREATE INDEX runs_open ON runs (state) WHERE state IN ('queued', 'running', 'cancelling');
      -- Little-endian doubles, one row a series: 'capital' (k) and one a layer key (Z).
      CREATE TABLE run_payoffs (
        run_id uuid NOT NULL REFERENCES runs,
        position integer NOT NULL,
        series text NOT NULL,
        bytes bytea NOT NULL,
        PRIMARY KEY (run_id, position)
      );
      ALTER TABLE run_payoffs ALTER COLUMN bytes SET STORAGE EXTERNAL;

      CREATE TABLE outbox (
        id bigint GENERATED ALWAYS AS IDENTITY PRIMARY KEY,
        topic text NOT NULL,
        subject_id text NOT NULL,
        created_at timestamptz NOT NULL DEFAULT now(),
        dispatched_at timestamptz
      );
      CREATE INDEX outbox_waiting ON outbox (id) WHERE dispatched_at IS NULL;
    `);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query(`
      DROP TABLE outbox, run_payoffs, runs, contract_layers, contracts, book_versions, book_head, programmes, zones, bases CASCADE;
    `);
  }
}
