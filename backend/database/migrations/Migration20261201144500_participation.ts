import { Migration } from '@mikro-orm/migrations';

/** When the criteria were checked, and what a withdrawal means for data and follow-up. */
export class Migration20261201144500_participation extends Migration {
  override up(): void {
    this.addSql(
      'alter table "participant" add column "eligible_on" date null, add column "earlier_data" text check ("earlier_data" in (\'kept\', \'left-out\')) null, add column "safety_follow_up" boolean null',
    );
  }
}
