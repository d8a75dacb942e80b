import type { MigrationInterface, QueryRunner } from 'typeorm';

const TABLES = `
CREATE TABLE lab (
  id uuid NOT NULL CONSTRAINT lab_pk PRIMARY KEY,
  name text NOT NULL CONSTRAINT lab_name_key UNIQUE,
  capture_number_prefix text NOT NULL,
  next_capture_number integer NOT NULL DEFAULT 1,
  created_at timestamptz NOT NULL DEFAULT now()
);

CREATE TABLE person (
  id uuid NOT NULL CONSTRAINT person_pk PRIMARY KEY,
  email text NOT NULL CONSTRAINT person_email_key UNIQUE,
  name text NOT NULL,
  password_hash text NOT NULL,
  disabled_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  CONSTRAINT person_email_lower_case CHECK (email = lower(email))
);

CREATE TABLE membership (
  lab_id uuid NOT NULL CONSTRAINT membership_lab_fk REFERENCES lab (id) ON DELETE CASCADE,
  person_id uuid NOT NULL CONSTRAINT membership_person_fk REFERENCES person (id) ON DELETE CASCADE,
  role text NOT NULL,
  CONSTRAINT membership_pk PRIMARY KEY (lab_id, person_id)
);
CREATE INDEX membership_person_idx ON membership (person_id);

CREATE TABLE token (
  id uuid NOT NULL CONSTRAINT token_pk PRIMARY KEY,
  lab_id uuid NOT NULL CONSTRAINT token_lab_fk REFERENCES lab (id) ON DELETE CASCADE,
  person_id uuid NOT NULL CONSTRAINT token_person_fk REFERENCES person (id) ON DELETE CASCADE,
  name text NOT NULL,
  hash bytea NOT NULL CONSTRAINT token_hash_key UNIQUE,
  created_at timestamptz NOT NULL DEFAULT now(),
  last_used_at timestamptz,
  expires_at timestamptz,
  revoked_at timestamptz
);
CREATE INDEX token_person_idx ON token (person_id);

CREATE TABLE campaign (
  id uuid NOT NULL CONSTRAINT campaign_pk PRIMARY KEY,
  lab_id uuid NOT NULL CONSTRAINT campaign_lab_fk REFERENCES lab (id) ON DELETE CASCADE,
  name text NOT NULL,
  limit_dbm_per_hz double precision,
  created_at timestamptz NOT NULL DEFAULT now(),
  CONSTRAINT campaign_name_key UNIQUE (lab_id, name)
);

CREATE TABLE capture (
  id uuid NOT NULL CONSTRAINT capture_pk PRIMARY KEY,
  lab_id uuid NOT NULL CONSTRAINT capture_lab_fk REFERENCES lab (id) ON DELETE RESTRICT,
  number text NOT NULL,
  name text NOT NULL,
  file_name text NOT NULL,
  media_type text NOT NULL,
  bytes bigint NOT NULL,
  sha256 text NOT NULL,
  state text NOT NULL DEFAULT 'received',
  progress_points integer,
  progress_of_points integer,
  uploader_id uuid NOT NULL CONSTRAINT capture_uploader_fk REFERENCES person (id) ON DELETE RESTRICT,
  campaign_id uuid CONSTRAINT capture_campaign_fk REFERENCES campaign (id) ON DELETE SET NULL,
  file_settings jsonb NOT NULL DEFAULT '{}',
  setting_changes jsonb NOT NULL DEFAULT '{}',
  problems jsonb NOT NULL DEFAULT '[]',
  understanding jsonb,
  sparkline jsonb,
  reader_version text,
  points integer,
  centre_hz double precision,
  span_hz double precision,
  rbw_hz double precision,
  latest_estimate_id uuid,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  CONSTRAINT capture_sha256_key UNIQUE (lab_id, sha256),
  CONSTRAINT capture_number_key UNIQUE (lab_id, number)
);
CREATE INDEX capture_lab_idx ON capture (lab_id, id);
CREATE INDEX capture_campaign_idx ON capture (campaign_id);
CREATE INDEX capture_unread_idx ON capture (state) WHERE state = ANY (ARRAY['received'::text, 'reading'::text]);

CREATE TABLE capture_chunk (
  capture_id uuid NOT NULL CONSTRAINT capture_chunk_capture_fk
    REFERENCES capture (id) ON DELETE CASCADE DEFERRABLE INITIALLY DEFERRED,
  index integer NOT NULL,
  bytes bytea NOT NULL,
  CONSTRAINT capture_chunk_pk PRIMARY KEY (capture_id, index)
);
ALTER TABLE capture_chunk ALTER COLUMN bytes SET STORAGE EXTERNAL;

CREATE TABLE trace (
  capture_id uuid NOT NULL CONSTRAINT trace_capture_fk REFERENCES capture (id) ON DELETE CASCADE,
  index integer NOT NULL,
  name text NOT NULL,
  unit text NOT NULL,
  unit_in_file text NOT NULL,
  points integer NOT NULL,
  first_hz double precision NOT NULL,
  last_hz double precision NOT NULL,
  spacing_hz double precision NOT NULL,
  uniform boolean NOT NULL,
  min_level double precision NOT NULL,
  max_level double precision NOT NULL,
  settings jsonb NOT NULL DEFAULT '{}',
  frequencies bytea NOT NULL,
  levels bytea NOT NULL,
  CONSTRAINT trace_pk PRIMARY KEY (capture_id, index)
);
ALTER TABLE trace ALTER COLUMN frequencies SET STORAGE EXTERNAL, ALTER COLUMN levels SET STORAGE EXTERNAL;

CREATE TABLE estimate (
  id uuid NOT NULL CONSTRAINT estimate_pk PRIMARY KEY,
  capture_id uuid NOT NULL CONSTRAINT estimate_capture_fk REFERENCES capture (id) ON DELETE RESTRICT,
  number integer NOT NULL,
  state text NOT NULL DEFAULT 'working',
  body jsonb NOT NULL,
  request jsonb NOT NULL,
  change text NOT NULL,
  engine_version text NOT NULL,
  author_id uuid CONSTRAINT estimate_author_fk REFERENCES person (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  verdict text NOT NULL,
  verdict_summary text NOT NULL,
  dbm_per_hz double precision,
  low_dbm_per_hz double precision,
  high_dbm_per_hz double precision,
  expanded_uncertainty_db double precision,
  spurs integer NOT NULL,
  stops integer NOT NULL,
  cautions integer NOT NULL,
  CONSTRAINT estimate_number_key UNIQUE (capture_id, number)
);
ALTER TABLE capture ADD CONSTRAINT capture_latest_estimate_fk
  FOREIGN KEY (latest_estimate_id) REFERENCES estimate (id) ON DELETE RESTRICT;

CREATE TABLE worker_heartbeat (
  id uuid NOT NULL CONSTRAINT worker_heartbeat_pk PRIMARY KEY,
  host text NOT NULL,
  pid integer NOT NULL,
  lock_names text[] NOT NULL,
  started_at timestamptz NOT NULL DEFAULT now(),
  seen_at timestamptz NOT NULL DEFAULT now()
);

CREATE TABLE audit_entry (
  id uuid NOT NULL CONSTRAINT audit_entry_pk PRIMARY KEY,
  lab_id uuid NOT NULL CONSTRAINT audit_entry_lab_fk REFERENCES lab (id) ON DELETE RESTRICT,
  person_id uuid CONSTRAINT audit_entry_person_fk REFERENCES person (id) ON DELETE RESTRICT,
  action text NOT NULL,
  object_id uuid NOT NULL,
  detail jsonb NOT NULL DEFAULT '{}',
  at timestamptz NOT NULL DEFAULT now()
);
CREATE INDEX audit_entry_lab_idx ON audit_entry (lab_id, id);

CREATE TABLE session (
  sid varchar NOT NULL CONSTRAINT session_pk PRIMARY KEY,
  sess json NOT NULL,
  expire timestamp(6) NOT NULL
);
CREATE INDEX session_expire_idx ON session (expire);

CREATE TABLE rate_limit (
  key text NOT NULL CONSTRAINT rate_limit_pk PRIMARY KEY,
  hits integer NOT NULL,
  resets_at timestamptz NOT NULL
);
`;

const RULES = `
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'Rows of % are written once and never change.', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;

CREATE FUNCTION refuse_direct_delete() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF pg_trigger_depth() < 2 THEN
    RAISE EXCEPTION 'Rows of % go only with their capture.', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN OLD;
END $$;

CREATE FUNCTION keep_estimate() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF to_jsonb(NEW) - 'state' IS DISTINCT FROM to_jsonb(OLD) - 'state' THEN
    RAISE EXCEPTION 'An estimate is written once; its state alone may change.' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;

CREATE FUNCTION keep_original() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (NEW.id, NEW.lab_id, NEW.number, NEW.bytes, NEW.sha256, NEW.uploader_id, NEW.created_at)
    IS DISTINCT FROM (OLD.id, OLD.lab_id, OLD.number, OLD.bytes, OLD.sha256, OLD.uploader_id, OLD.created_at) THEN
    RAISE EXCEPTION 'What a capture was uploaded as never changes.' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;

CREATE TRIGGER capture_chunk_update BEFORE UPDATE ON capture_chunk FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER capture_chunk_delete BEFORE DELETE ON capture_chunk FOR EACH ROW EXECUTE FUNCTION refuse_direct_delete();
CREATE TRIGGER capture_chunk_truncate BEFORE TRUNCATE ON capture_chunk EXECUTE FUNCTION refuse_change();
CREATE TRIGGER capture_update BEFORE UPDATE ON capture FOR EACH ROW EXECUTE FUNCTION keep_original();
CREATE TRIGGER estimate_update BEFORE UPDATE ON estimate FOR EACH ROW EXECUTE FUNCTION keep_estimate();
CREATE TRIGGER estimate_delete BEFORE DELETE ON estimate FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER estimate_truncate BEFORE TRUNCATE ON estimate EXECUTE FUNCTION refuse_change();
CREATE TRIGGER audit_entry_update BEFORE UPDATE OR DELETE ON audit_entry FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER audit_entry_truncate BEFORE TRUNCATE ON audit_entry EXECUTE FUNCTION refuse_change();
`;

/** Labs, people, captures with their bytes and traces, estimates, and the rules that keep records as they were written. */
export class CreateSpine1764590400000 implements MigrationInterface {
  name = 'CreateSpine1764590400000';

  async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(TABLES);
    await queryRunner.query(RULES);
  }

  async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query('ALTER TABLE capture DROP CONSTRAINT capture_latest_estimate_fk');
    await queryRunner.query(
      `DROP TABLE rate_limit, session, audit_entry, worker_heartbeat, estimate, trace, capture_chunk, capture,
         campaign, token, membership, person, lab`,
    );
    await queryRunner.query(
      'DROP FUNCTION refuse_change, refuse_direct_delete, keep_estimate, keep_original',
    );
  }
}
