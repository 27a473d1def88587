import { Migration } from '@mikro-orm/migrations';

/** Drafts of the protocol as text, schemas in the order their fields were written, previews of the drafting table. */
export class Migration20261201150000_set_up extends Migration {
  override up(): void {
    this.addSql('alter table "protocol_draft" add column "text" text not null');
    this.addSql('alter table "protocol_draft" drop column "content"');
    // `jsonb` sorts an object's members: the fields of a form would lose their order.
    this.addSql('alter table "instrument_version" alter column "schema" type json using "schema"::json');
    this.addSql('alter table "instrument_version" alter column "samples" type json using "samples"::json');
    this.addSql('alter table "protocol_version" alter column "content" type json using "content"::json');
    this.addSql(
      'create table "instrument_preview" ("study_id" uuid not null, "hash" varchar(64) not null, "validator_code" text not null, "made_at" timestamptz not null, constraint "instrument_preview_pkey" primary key ("study_id", "hash"))',
    );
    this.addSql(
      'alter table "instrument_preview" add constraint "instrument_preview_study_id_foreign" foreign key ("study_id") references "study" ("id") on update cascade',
    );
    this.addSql('grant select, insert, delete on "instrument_preview" to vesselry_app');
    this.addSql('create index "person_name_id_index" on "person" ("name", "id")');
  }
}
