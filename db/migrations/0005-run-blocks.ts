import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Blocks of large runs, kept while the run is open. */
export class RunBlocks1000000000005 implements MigrationInterface {
  name = 'RunBlocks1000000000005';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`
      CREATE TABLE run_blocks (
        run_id uuid NOT NULL REFERENCES runs,
        block integer NOT NULL CHECK (block >= 0),
        bytes bytea NOT NULL,
        PRIMARY KEY (run_id, block)
      );
      ALTER TABLE run_blocks ALTER COLUMN bytes SET STORAGE EXTERNAL;
    `);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE run_blocks');
  }
}
