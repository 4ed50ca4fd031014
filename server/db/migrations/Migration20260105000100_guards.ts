import { Migration } from '@mikro-orm/migrations'

/** What the schema builder cannot say: rows that may never change. */
export class Migration20260105000100_guards extends Migration {
  override async up(): Promise<void> {
    this.addSql(`create function refuse_change() returns trigger language plpgsql as $$ begin raise exception 'rows of % are never changed', tg_table_name using errcode = 'integrity_constraint_violation'; end $$;`)
    for (const table of ['audit_event', 'audit_link', 'audit_seal', 'rubric_version', 'flow_sheet_reading', 'lesson_version']) {
      this.addSql(`create trigger ${table}_never_changes before update or delete on "${table}" for each row execute function refuse_change();`)
      this.addSql(`create trigger ${table}_never_emptied before truncate on "${table}" for each statement execute function refuse_change();`)
    }
    // Grants say it too: the application's own role may add to the audit record and read it, nothing else.
    for (const table of ['audit_event', 'audit_link', 'audit_seal']) this.addSql(`revoke update, delete, truncate on "${table}" from current_user;`)
    // A link's foreign key locks the event it names, and PostgreSQL asks for the right to update one column for that; the trigger still refuses.
    this.addSql('grant update ("id") on "audit_event" to current_user;')
  }

  override async down(): Promise<void> {
    this.addSql('drop function refuse_change() cascade;')
  }
}
