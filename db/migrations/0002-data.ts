import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Event catalogues, submissions and loss tables: versions are never changed, only superseded. */
export class Data1000000000002 implements MigrationInterface {
  name = 'Data1000000000002';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`
      CREATE TABLE catalogues (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        -- Keys the random numbers of every version: given once, never changed, never a database id.
        lineage text NOT NULL UNIQUE CHECK (lineage ~ '^[a-z0-9-]{3,120}$'),
        name text NOT NULL UNIQUE,
        description text NOT NULL DEFAULT '',
        created_at timestamptz NOT NULL DEFAULT now()
      );
      -- An event keeps its number through all versions of its catalogue.
      CREATE TABLE catalogue_event_names (
        catalogue_id uuid NOT NULL REFERENCES catalogues,
        event_no integer NOT NULL CHECK (event_no >= 0),
        event text NOT NULL CHECK (length(event) BETWEEN 1 AND 100),
        PRIMARY KEY (catalogue_id, event_no),
        UNIQUE (catalogue_id, event)
      );
      CREATE TABLE catalogue_versions (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        catalogue_id uuid NOT NULL REFERENCES catalogues,
        number integer NOT NULL CHECK (number > 0),
        state text NOT NULL DEFAULT 'draft' CHECK (state IN ('draft', 'released', 'withdrawn')),
        file_name text NOT NULL,
        content_hash text NOT NULL CHECK (content_hash ~ '^[0-9a-f]{64}$'),
        event_count integer NOT NULL CHECK (event_count > 0),
        rate_per_year double precision NOT NULL CHECK (rate_per_year > 0),
        -- [{peril, events, ratePerYear}] and [{region, events, ratePerYear}]
        perils jsonb NOT NULL,
        regions jsonb NOT NULL,
        uploaded_by uuid NOT NULL REFERENCES people,
        uploaded_at timestamptz NOT NULL DEFAULT now(),
        released_by uuid REFERENCES people,
        released_at timestamptz,
        UNIQUE (catalogue_id, number)
      );
      CREATE UNIQUE INDEX catalogue_one_released ON catalogue_versions (catalogue_id) WHERE state = 'released';
      CREATE TABLE catalogue_events (
        version_id uuid NOT NULL REFERENCES catalogue_versions,
        row_no integer NOT NULL,
        event_no integer NOT NULL,
        rate_per_year double precision NOT NULL CHECK (rate_per_year > 0 AND rate_per_year < 'Infinity'),
        peril text NOT NULL,
        region text NOT NULL,
        season_day smallint CHECK (season_day BETWEEN 1 AND 365),
        event_group text,
        variance_to_mean double precision CHECK (variance_to_mean >= 1),
        PRIMARY KEY (version_id, row_no),
        UNIQUE (version_id, event_no)
      );

      CREATE SEQUENCE submission_numbers;
      CREATE TABLE submissions (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        reference text NOT NULL UNIQUE,
        cedant_id uuid NOT NULL REFERENCES cedants,
        broker_firm_id uuid NOT NULL REFERENCES broker_firms,
        contact_id uuid NOT NULL REFERENCES contacts,
        treaty_year integer NOT NULL CHECK (treaty_year BETWEEN 2000 AND 2100),
        inception_on date NOT NULL,
        currency char(3) NOT NULL,
        state text NOT NULL DEFAULT 'open' CHECK (state IN ('open', 'closed')),
        note text NOT NULL DEFAULT '',
        owner_id uuid NOT NULL REFERENCES people,
        version integer NOT NULL DEFAULT 1,
        created_at timestamptz NOT NULL DEFAULT now()
      );
      -- A table of losses on one catalogue. Tables of the opening book belong to no submission.
      CREATE TABLE loss_tables (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        lineage text NOT NULL UNIQUE CHECK (lineage ~ '^[a-z0-9-]{3,120}$'),
        submission_id uuid REFERENCES submissions,
        catalogue_id uuid NOT NULL REFERENCES catalogues,
        name text NOT NULL,
        created_at timestamptz NOT NULL DEFAULT now(),
        UNIQUE (submission_id, name)
      );
      CREATE TABLE loss_table_versions (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        loss_table_id uuid NOT NULL REFERENCES loss_tables,
        number integer NOT NULL CHECK (number > 0),
        -- The version its events were checked against.
        catalogue_version_id uuid NOT NULL REFERENCES catalogue_versions,
        currency char(3) NOT NULL,
        basis_note text NOT NULL DEFAULT '',
        file_name text NOT NULL,
        content_hash text NOT NULL CHECK (content_hash ~ '^[0-9a-f]{64}$'),
        row_count integer NOT NULL CHECK (row_count > 0),
        yearly_mean double precision NOT NULL,
        -- [{peril, region}] with a loss: the accumulation zones it can touch.
        footprint jsonb NOT NULL,
        uploaded_by uuid NOT NULL REFERENCES people,
        uploaded_at timestamptz NOT NULL DEFAULT now(),
        UNIQUE (loss_table_id, number)
      );
      CREATE TABLE loss_rows (
        version_id uuid NOT NULL REFERENCES loss_table_versions,
        row_no integer NOT NULL,
        event_no integer NOT NULL,
        mean_loss double precision NOT NULL CHECK (mean_loss >= 0 AND mean_loss < 'Infinity'),
        sd double precision NOT NULL CHECK (sd >= 0 AND sd < 'Infinity'),
        common_share double precision NOT NULL CHECK (common_share BETWEEN 0 AND 1),
        exposed_value double precision CHECK (exposed_value > 0 AND exposed_value < 'Infinity'),
        PRIMARY KEY (version_id, row_no),
        UNIQUE (version_id, event_no),
        CHECK (exposed_value IS NULL OR sd = 0 OR sd * sd < mean_loss * (exposed_value - mean_loss))
      );
    `);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query(`
      DROP TABLE loss_rows, loss_table_versions, loss_tables, submissions, catalogue_events, catalogue_versions,
        catalogue_event_names, catalogues;
      DROP SEQUENCE submission_numbers;
    `);
  }
}
