import { Migration } from '@mikro-orm/migrations'

/** What the schema builder cannot say: a cohort never has more people than benches, and money is never rewritten. */
export class Migration20261201000100_place_and_money_guards extends Migration {
  override async up(): Promise<void> {
    this.addSql(`create unique index "bench_place_moved_once" on "bench_place" ("moved_from_id") where "moved_from_id" is not null;`)
    this.addSql(`alter table "bench_place" add constraint "bench_place_bench_taken" check ("state" not in ('offered', 'deposit-paid', 'confirmed', 'here') or "slot" is not null);`)
    this.addSql(`alter table "bench_place" add constraint "bench_place_bench_number" check ("slot" is null or "slot" >= 1);`)
    // With the unique index on taken slots this holds the capacity, whoever writes.
    this.addSql(`create function bench_place_within_cohort() returns trigger language plpgsql as $$ begin
      if new."state" in ('offered', 'deposit-paid', 'confirmed', 'here') and new."slot" > (select "places" from "cohort" where "id" = new."cohort_id" for share) then
        raise exception 'bench % is more than the cohort has', new."slot" using errcode = 'check_violation', constraint = 'bench_place_within_cohort';
      end if;
      return new; end $$;`)
    this.addSql(`create trigger "bench_place_within_cohort" before insert or update of "slot", "state", "cohort_id" on "bench_place" for each row execute function bench_place_within_cohort();`)
    this.addSql(`create function cohort_keeps_benches() returns trigger language plpgsql as $$ begin
      if exists (select 1 from "bench_place" where "cohort_id" = new."id" and "state" in ('offered', 'deposit-paid', 'confirmed', 'here') and "slot" > new."places") then
        raise exception 'somebody has a bench above %', new."places" using errcode = 'check_violation', constraint = 'cohort_keeps_benches';
      end if;
      return new; end $$;`)
    this.addSql(`create trigger "cohort_keeps_benches" before update of "places" on "cohort" for each row execute function cohort_keeps_benches();`)

    this.addSql(`alter table "ledger_line" add constraint "ledger_line_sign" check ("amount_minor" <> 0 and ("amount_minor" > 0) = ("kind" in ('card', 'bank', 'moved-in')));`)
    this.addSql(`alter table "payment" add constraint "payment_amount" check ("amount_minor" > 0);`)
    this.addSql(`alter table "refund" add constraint "refund_amount" check ("amount_minor" > 0);`)
    for (const table of ['ledger_line', 'payment_event', 'consent_text', 'consent', 'sharing_choice']) {
      this.addSql(`create trigger ${table}_never_changes before update or delete on "${table}" for each row execute function refuse_change();`)
      this.addSql(`create trigger ${table}_never_emptied before truncate on "${table}" for each statement execute function refuse_change();`)
    }
  }

  override async down(): Promise<void> {
    throw new Error('This migration is not taken back: restore a backup instead.')
  }
}
