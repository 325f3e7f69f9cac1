import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Quotes, what they hold of the zones, links and codes for brokers, and mails. */
export class Quotes1000000000004 implements MigrationInterface {
  name = 'Quotes1000000000004';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`
      CREATE SEQUENCE quote_numbers;
      -- One row a version; versions of one quote share family and reference.
      CREATE TABLE quotes (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        family_id uuid NOT NULL,
        reference text NOT NULL,
        number integer NOT NULL CHECK (number > 0),
        programme_id uuid NOT NULL REFERENCES programmes,
        submission_id uuid NOT NULL REFERENCES submissions,
        broker_firm_id uuid NOT NULL REFERENCES broker_firms,
        contact_id uuid NOT NULL REFERENCES contacts,
        state text NOT NULL DEFAULT 'draft' CHECK (state IN ('draft', 'referred', 'approved', 'declined', 'issued',
          'ordered', 'bound', 'not taken up', 'lapsed', 'withdrawn', 'superseded')),
        kind text NOT NULL CHECK (kind IN ('indication', 'firm')),
        run_id uuid NOT NULL REFERENCES runs,
        terms jsonb NOT NULL,
        valid_until date NOT NULL,
        note text NOT NULL DEFAULT '',
        author_id uuid NOT NULL REFERENCES people,
        submitted_by uuid REFERENCES people,
        submitted_at timestamptz,
        decided_by uuid REFERENCES people,
        decided_at timestamptz,
        decision_note text,
        issued_by uuid REFERENCES people,
        issued_at timestamptz,
        bound_by uuid REFERENCES people,
        bound_at timestamptz,
        version integer NOT NULL DEFAULT 1,
        created_at timestamptz NOT NULL DEFAULT now(),
        updated_at timestamptz NOT NULL DEFAULT now(),
        UNIQUE (family_id, number)
      );
      CREATE INDEX quotes_programme ON quotes (programme_id);
      CREATE INDEX quotes_firm ON quotes (broker_firm_id);
      CREATE INDEX quotes_state ON quotes (state);
      ALTER TABLE contracts ADD FOREIGN KEY (quote_id) REFERENCES quotes;
      ALTER TABLE runs ADD FOREIGN KEY (reprices_quote_id) REFERENCES quotes;
      CREATE TABLE quote_layers (
        quote_id uuid NOT NULL REFERENCES quotes,
        position integer NOT NULL,
        layer_key text NOT NULL,
        premium numeric(20,4) NOT NULL CHECK (premium > 0),
        PRIMARY KEY (quote_id, position),
        UNIQUE (quote_id, layer_key)
      );
      -- Terms are frozen out of draft, whatever the code above this table believes. The desk's own re-pricing may
      -- only move run_id, never terms.
      CREATE FUNCTION quote_terms_frozen() RETURNS trigger LANGUAGE plpgsql AS $$
      BEGIN
        IF OLD.state <> 'draft' AND (NEW.terms, NEW.kind, NEW.programme_id, NEW.family_id, NEW.number, NEW.reference)
            IS DISTINCT FROM (OLD.terms, OLD.kind, OLD.programme_id, OLD.family_id, OLD.number, OLD.reference) THEN
          RAISE EXCEPTION 'quote % is %: its terms are frozen', OLD.id, OLD.state USING ERRCODE = 'check_violation';
        END IF;
        RETURN NEW;
      END $$;
      CREATE TRIGGER quote_terms_frozen BEFORE UPDATE ON quotes FOR EACH ROW EXECUTE FUNCTION quote_terms_frozen();
      CREATE FUNCTION quote_premiums_frozen() RETURNS trigger LANGUAGE plpgsql AS $$
      DECLARE quote_state text;
      BEGIN
        SELECT state INTO quote_state FROM quotes WHERE id = COALESCE(OLD.quote_id, NEW.quote_id);
        IF quote_state <> 'draft' THEN
          RAISE EXCEPTION 'quote is %: its premiums are frozen', quote_state USING ERRCODE = 'check_violation';
        END IF;
        RETURN COALESCE(NEW, OLD);
      END $$;
      CREATE TRIGGER quote_premiums_frozen BEFORE INSERT OR UPDATE OR DELETE ON quote_layers
        FOR EACH ROW EXECUTE FUNCTION quote_premiums_frozen();

      -- Firm order terms as the broker gave them: one an issued version.
      CREATE TABLE orders (
        quote_id uuid PRIMARY KEY REFERENCES quotes,
        received_at timestamptz NOT NULL DEFAULT now(),
        person_id uuid REFERENCES people,
        contact_id uuid REFERENCES contacts,
        -- [{key, orderShare}]
        layers jsonb NOT NULL,
        note text NOT NULL DEFAULT '',
        CHECK ((person_id IS NULL) <> (contact_id IS NULL))
      );

      -- Capacity taken from a zone: held by a firm quote, used by a contract. Given back by released_at.
      CREATE TABLE zone_uses (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        zone_id uuid NOT NULL REFERENCES zones,
        quote_id uuid REFERENCES quotes,
        contract_id uuid REFERENCES contracts,
        amount numeric(20,4) NOT NULL CHECK (amount >= 0),
        taken_at timestamptz NOT NULL DEFAULT now(),
        released_at timestamptz,
        CHECK ((quote_id IS NULL) <> (contract_id IS NULL))
      );
      CREATE INDEX zone_uses_open ON zone_uses (zone_id) WHERE released_at IS NULL;

      CREATE TABLE quote_links (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        quote_id uuid NOT NULL REFERENCES quotes,
        contact_id uuid NOT NULL REFERENCES contacts,
        expires_at timestamptz NOT NULL,
        revoked_at timestamptz,
        created_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE TABLE link_codes (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        link_id uuid NOT NULL REFERENCES quote_links,
        expires_at timestamptz NOT NULL,
        attempts integer NOT NULL DEFAULT 0,
        used_at timestamptz,
        created_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE INDEX link_codes_link ON link_codes (link_id, created_at DESC);

      CREATE TABLE mails (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        kind text NOT NULL CHECK (kind IN ('quote issued', 'quote bound', 'order code', 'referral waiting',
          'referral outcome', 'broker answered')),
        -- Exactly one reader: a person of the house or a broker's contact.
        person_id uuid REFERENCES people,
        contact_id uuid REFERENCES contacts,
        quote_id uuid REFERENCES quotes,
        -- What the template shows: names and agreed terms; secrets are derived at sending and never stored.
        model jsonb NOT NULL,
        subject text NOT NULL,
        -- Stable, so that a mail sent twice is recognised as one.
        message_id text NOT NULL UNIQUE,
        state text NOT NULL DEFAULT 'waiting' CHECK (state IN ('waiting', 'sent', 'failed')),
        attempts integer NOT NULL DEFAULT 0,
        last_error text,
        created_at timestamptz NOT NULL DEFAULT now(),
        sent_at timestamptz,
        CHECK ((person_id IS NULL) <> (contact_id IS NULL))
      );
      CREATE INDEX mails_quote ON mails (quote_id);
      -- What the local post office received, in demo mode only.
      CREATE TABLE captured_mails (
        id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
        message_id text NOT NULL,
        recipient text NOT NULL,
        raw bytea NOT NULL,
        received_at timestamptz NOT NULL DEFAULT now()
      );
      CREATE INDEX captured_mails_message ON captured_mails (message_id);
    `);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query(`
      ALTER TABLE contracts DROP CONSTRAINT contracts_quote_id_fkey;
      ALTER TABLE runs DROP CONSTRAINT runs_reprices_quote_id_fkey;
      DROP TABLE captured_mails, mails, link_codes, quote_links, zone_uses, orders, quote_layers, quotes;
      DROP FUNCTION quote_terms_frozen();
      DROP FUNCTION quote_premiums_frozen();
      DROP SEQUENCE quote_numbers;
    `);
  }
}
