import { Migration } from '@mikro-orm/migrations';

const partitions = 8;
const numbers = Array.from({ length: partitions }, (_, index) => index);

/** Tables that only grow: the application's role may add and read, nothing else. */
const appendOnly = [
  'audit_event',
  'entry_revision',
  'signature',
  'study_lock',
  'cut',
  'protocol_version',
  'instrument_version',
  'plan_version',
  'query_message',
  'check_outcome',
  'step_event',
  'emergency_opening',
];

/** The chain, the values, the revisions; partitions, triggers that refuse, and the two roles' rights. */
export class Migration20261201143100_trail extends Migration {
  override up(): void {
    this.addSql(`create table audit_event (
      study_id uuid not null, sequence bigint not null, at timestamptz not null, actor_id uuid null,
      membership_id uuid null, role text not null, kind text not null, subject text not null,
      participant_id uuid null, site_id uuid null, changes jsonb not null, reason text null, cause bigint null,
      version text not null, previous_hash bytea not null, hash bytea not null,
      primary key (study_id, sequence)) partition by hash (study_id)`);
    this.addSql('create index audit_event_subject on audit_event (study_id, subject, sequence)');
    this.addSql('create index audit_event_participant on audit_event (study_id, participant_id, sequence)');
    this.addSql('create index audit_event_actor on audit_event (study_id, actor_id, sequence)');

    this.addSql(`create table recorded_value (
      study_id uuid not null, id uuid not null, sequence bigint not null, subject_type text not null,
      subject_id uuid not null, address text not null, level text not null, salt bytea null, value jsonb null,
      written text null, derivation jsonb null, commitment bytea not null, redacted_at timestamptz null,
      primary key (study_id, id)) partition by hash (study_id)`);
    this.addSql(
      'create index recorded_value_address on recorded_value (study_id, subject_id, address, sequence desc)',
    );
    this.addSql('create index recorded_value_sequence on recorded_value (study_id, sequence)');

    this.addSql(`create table entry_revision (
      study_id uuid not null, entry_id uuid not null, revision int not null, sequence bigint not null,
      content_hash bytea not null, changes jsonb not null,
      primary key (study_id, entry_id, revision)) partition by hash (study_id)`);

    for (const table of ['audit_event', 'recorded_value', 'entry_revision', 'entry']) {
      for (const n of numbers) {
        this.addSql(
          `create table ${table}_p${n} partition of ${table} for values with (modulus ${partitions}, remainder ${n})`,
        );
      }
    }

    this.addSql(`create table idempotency_key (
      person_id uuid not null, key text not null, body_hash text not null, study_id uuid not null,
      sequence bigint not null, at timestamptz not null, constraint idempotency_key_pkey primary key (person_id, key))`);
    this.addSql(`create table session (
      sid varchar not null primary key, sess json not null, expire timestamp(6) not null)`);
    this.addSql('create index session_expire on session (expire)');
    this.addSql(
      'create table rate_limit (key varchar(255) primary key, points integer not null default 0, expire bigint)',
    );

    this.addSql(`create function refuse_change() returns trigger language plpgsql as $$
      begin raise exception '% only grows: nothing in it is changed or removed', tg_table_name
        using errcode = 'insufficient_privilege'; end $$`);
    this.addSql(`create function refuse_value_change() returns trigger language plpgsql as $$
      begin
        if tg_op = 'UPDATE' and current_setting('vesselry.redaction', true) = 'on'
           and current_user = (select tableowner from pg_tables where tablename = 'recorded_value')
           and new.value is null and new.salt is null and new.written is null
           and (new.study_id, new.id, new.sequence, new.subject_type, new.subject_id, new.address, new.level, new.commitment)
             = (old.study_id, old.id, old.sequence, old.subject_type, old.subject_id, old.address, old.level, old.commitment)
        then return new; end if;
        raise exception 'recorded_value only grows: a value is emptied by redaction alone'
          using errcode = 'insufficient_privilege';
      end $$`);
    for (const table of [...appendOnly, 'recorded_value']) {
      const refuse = table === 'recorded_value' ? 'refuse_value_change' : 'refuse_change';
      this.addSql(
        `create trigger ${table}_no_change before update or delete on ${table} for each row execute function ${refuse}()`,
      );
      this.addSql(
        `create trigger ${table}_no_truncate before truncate on ${table} for each statement execute function refuse_change()`,
      );
    }
    // A statement trigger is not inherited: without these the owner could truncate a partition.
    for (const table of ['audit_event', 'recorded_value', 'entry_revision']) {
      for (const n of numbers) {
        this.addSql(
          `create trigger ${table}_p${n}_no_truncate before truncate on ${table}_p${n} for each statement execute function refuse_change()`,
        );
      }
    }

    this.addSql(`create function redact_value(in_study uuid, in_value uuid) returns void
      language plpgsql security definer set search_path = public as $$
      begin
        perform set_config('vesselry.redaction', 'on', true);
        update recorded_value set value = null, salt = null, written = null, redacted_at = clock_timestamp()
         where study_id = in_study and id = in_value;
        perform set_config('vesselry.redaction', 'off', true);
      end $$`);
    this.addSql('revoke all on function redact_value(uuid, uuid) from public');

    this.addSql(`do $$ begin
      if not exists (select from pg_roles where rolname = 'vesselry_app') then create role vesselry_app; end if;
    end $$`);
    this.addSql('grant usage on schema public, identity to vesselry_app');
    this.addSql('grant select, insert, update on all tables in schema public, identity to vesselry_app');
    for (const table of [...appendOnly, 'recorded_value']) {
      this.addSql(`revoke update on ${table} from vesselry_app`);
    }
    for (const table of ['audit_event', 'recorded_value', 'entry_revision', 'entry']) {
      for (const n of numbers) this.addSql(`revoke all on ${table}_p${n} from vesselry_app`);
    }
    this.addSql('revoke update on idempotency_key from vesselry_app');
    this.addSql('grant delete on session, rate_limit to vesselry_app');
    this.addSql('grant execute on function redact_value(uuid, uuid) to vesselry_app');
    this.addSql('revoke all on mikro_orm_migrations from vesselry_app');
    this.addSql('grant select on mikro_orm_migrations to vesselry_app');
  }
}
