import { Migration } from '@mikro-orm/migrations';

/** Beats and progress of jobs, and the outbox of mail; no entity stands for them. */
export class Migration20261201143200_jobs extends Migration {
  override up(): void {
    this.addSql(`create table job_beat (
      job_id uuid primary key,
      at timestamptz not null default clock_timestamp()
    )`);
    this.addSql(`create table job_progress (
      job_key uuid primary key,
      done int not null default 0 check (done >= 0),
      total int check (total >= 0),
      state text not null default 'queued' check (state in ('queued', 'running', 'done', 'failed', 'cancelled')),
      detail text,
      cancel_requested boolean not null default false,
      updated_at timestamptz not null default clock_timestamp()
    )`);
    this.addSql(`create table mail_outbox (
      id uuid primary key,
      recipient text not null,
      template text not null,
      params jsonb not null,
      state text not null default 'pending' check (state in ('pending', 'sent', 'failed')),
      attempts int not null default 0,
      problem text,
      created_at timestamptz not null default clock_timestamp(),
      settled_at timestamptz
    )`);
    this.addSql(`create index mail_outbox_unsent on mail_outbox (created_at) where state <> 'sent'`);
    this.addSql(
      'grant select, insert, update, delete on job_beat, job_progress, mail_outbox to vesselry_app',
    );
  }
}
