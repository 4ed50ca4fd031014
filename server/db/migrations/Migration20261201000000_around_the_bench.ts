import { Migration } from '@mikro-orm/migrations';

/** Lessons as documents, media, places from the ask on, money, consent. Lessons that were Markdown become paragraphs of a document. */
export class Migration20261201000000_around_the_bench extends Migration {

  override async up(): Promise<void> {
    this.addSql('create extension if not exists pg_trgm;');

    this.addSql(`create table "ask_try" ("id" uuid not null, "subject" varchar(300) not null, "at" timestamptz not null, constraint "ask_try_pkey" primary key ("id"));`);
    this.addSql(`create index "ask_try_subject_at_index" on "ask_try" ("subject", "at");`);

    this.addSql(`create table "course" ("id" uuid not null, "code" varchar(40) not null, "title" varchar(160) not null, "summary" text not null, "created_at" timestamptz not null, constraint "course_pkey" primary key ("id"));`);
    this.addSql(`alter table "course" add constraint "course_code_unique" unique ("code");`);

    this.addSql(`create table "course_module" ("id" uuid not null, "course_id" uuid not null, "number" int not null, "title" varchar(160) not null, "outcome" text not null, "gates" text[] not null, constraint "course_module_pkey" primary key ("id"));`);
    this.addSql(`alter table "course_module" add constraint "course_module_course_id_number_unique" unique ("course_id", "number");`);

    this.addSql(`create table "payment_event" ("id" varchar(255) not null, "type" varchar(120) not null, "about" varchar(255) null, "happened_at" timestamptz not null, "received_at" timestamptz not null, constraint "payment_event_pkey" primary key ("id"));`);

    this.addSql(`create table "sponsor" ("id" uuid not null, "organisation" varchar(160) not null, "contact" varchar(120) not null, "email" varchar(254) not null, "created_at" timestamptz not null, constraint "sponsor_pkey" primary key ("id"));`);
    this.addSql(`alter table "sponsor" add constraint "sponsor_organisation_unique" unique ("organisation");`);

    this.addSql(`create table "sharing_choice" ("id" uuid not null, "person_id" uuid not null, "code" varchar(40) not null, "allowed" boolean not null, "at" timestamptz not null, constraint "sharing_choice_pkey" primary key ("id"));`);
    this.addSql(`create index "sharing_choice_person_id_code_at_index" on "sharing_choice" ("person_id", "code", "at");`);

    this.addSql(`create table "media_asset" ("id" uuid not null, "kind" text check ("kind" in ('image', 'video')) not null, "title" varchar(160) not null, "name" varchar(80) null, "upload_id" uuid null, "key" varchar(200) not null, "content_type" varchar(120) not null, "bytes" bigint not null, "width" int null, "height" int null, "duration_seconds" double precision null, "state" text check ("state" in ('being checked', 'ready', 'refused')) not null, "problem" text null, "added_by_id" uuid null, "added_at" timestamptz not null, constraint "media_asset_pkey" primary key ("id"));`);
    this.addSql(`alter table "media_asset" add constraint "media_asset_name_unique" unique ("name");`);
    this.addSql(`create index "media_asset_added_at_index" on "media_asset" ("added_at");`);

    this.addSql(`create table "media_track" ("id" uuid not null, "asset_id" uuid not null, "kind" text check ("kind" in ('captions', 'chapters')) not null, "language" varchar(12) not null, "vtt" text not null, "cues" jsonb not null, "saved_by_id" uuid null, "saved_at" timestamptz not null, constraint "media_track_pkey" primary key ("id"));`);
    this.addSql(`alter table "media_track" add constraint "media_track_asset_id_kind_language_unique" unique ("asset_id", "kind", "language");`);

    this.addSql(`create table "lesson_passage" ("id" uuid not null, "lesson_id" uuid not null, "ordinal" int not null, "kind" text check ("kind" in ('text', 'caption')) not null, "anchor" varchar(120) not null, "heading" text not null, "body" text not null, "clip_id" uuid null, "from_ms" int null, "words" tsvector generated always as (setweight(to_tsvector('english'::regconfig, heading), 'A'::"char") || setweight(to_tsvector('english'::regconfig, body), 'B'::"char")) stored null, constraint "lesson_passage_pkey" primary key ("id"));`);
    this.addSql(`create index "lesson_passage_lesson_id_ordinal_index" on "lesson_passage" ("lesson_id", "ordinal");`);
    this.addSql(`create index "lesson_passage_words" on "lesson_passage" using gin ("words");`);

    this.addSql(`create table "lesson_word" ("word" varchar(40) not null, constraint "lesson_word_pkey" primary key ("word"));`);
    this.addSql(`create index "lesson_word_letters" on "lesson_word" using gin ("word" gin_trgm_ops);`);

    this.addSql(`create table "lesson_progress" ("id" uuid not null, "person_id" uuid not null, "lesson_id" uuid not null, "anchor" varchar(120) null, "kept_id" uuid null, "finished_at" timestamptz null, "updated_at" timestamptz not null, constraint "lesson_progress_pkey" primary key ("id"));`);
    this.addSql(`alter table "lesson_progress" add constraint "lesson_progress_person_id_lesson_id_unique" unique ("person_id", "lesson_id");`);

    this.addSql(`create table "lesson_note" ("id" uuid not null, "person_id" uuid not null, "lesson_id" uuid not null, "anchor" varchar(120) null, "text" text not null, "created_at" timestamptz not null, "updated_at" timestamptz not null, constraint "lesson_note_pkey" primary key ("id"));`);
    this.addSql(`create index "lesson_note_person_id_lesson_id_index" on "lesson_note" ("person_id", "lesson_id");`);

    this.addSql(`create table "lesson_draft" ("id" uuid not null, "lesson_id" uuid not null, "title" varchar(160) not null, "document" jsonb not null, "saved_by_id" uuid not null, "saved_at" timestamptz not null, constraint "lesson_draft_pkey" primary key ("id"));`);
    this.addSql(`alter table "lesson_draft" add constraint "lesson_draft_lesson_id_unique" unique ("lesson_id");`);

    this.addSql(`create table "consent_text" ("id" uuid not null, "version" int not null, "clauses" jsonb not null, "choices" jsonb not null, "stands_from" int not null, "saved_by_id" uuid null, "saved_at" timestamptz not null, constraint "consent_text_pkey" primary key ("id"));`);
    this.addSql(`alter table "consent_text" add constraint "consent_text_version_unique" unique ("version");`);

    this.addSql(`create table "consent" ("id" uuid not null, "person_id" uuid not null, "text_id" uuid not null, "ticks" text[] not null, "signed_as" varchar(120) not null, "guardian" varchar(120) null, "at" timestamptz not null, constraint "consent_pkey" primary key ("id"));`);
    this.addSql(`alter table "consent" add constraint "consent_person_id_text_id_unique" unique ("person_id", "text_id");`);

    this.addSql(`create table "purchase_order" ("id" uuid not null, "place_id" uuid not null, "sponsor_id" uuid not null, "number" varchar(60) not null, "amount_minor" int not null, "currency" varchar(3) not null, "received_at" timestamptz not null, "due_at" timestamptz not null, "taken_by_id" uuid not null, constraint "purchase_order_pkey" primary key ("id"));`);
    this.addSql(`alter table "purchase_order" add constraint "purchase_order_place_id_unique" unique ("place_id");`);
    this.addSql(`alter table "purchase_order" add constraint "purchase_order_sponsor_id_number_unique" unique ("sponsor_id", "number");`);

    this.addSql(`create table "payment" ("id" uuid not null, "place_id" uuid not null, "purpose" text check ("purpose" in ('deposit', 'balance', 'renewal')) not null, "amount_minor" int not null, "currency" varchar(3) not null, "state" text check ("state" in ('begun', 'open', 'paid', 'expired')) not null, "session_id" varchar(255) null, "intent_id" varchar(255) null, "url" text null, "created_at" timestamptz not null, "expires_at" timestamptz not null, "paid_at" timestamptz null, constraint "payment_pkey" primary key ("id"));`);
    this.addSql(`alter table "payment" add constraint "payment_session_id_unique" unique ("session_id");`);
    this.addSql(`create index "payment_state_created_at_index" on "payment" ("state", "created_at");`);
    this.addSql(`create unique index "payment_one_open" on "payment" ("place_id", "purpose") where "state" in ('begun', 'open');`);

    this.addSql(`create table "refund" ("id" uuid not null, "place_id" uuid not null, "payment_id" uuid null, "purpose" text check ("purpose" in ('deposit', 'balance', 'renewal')) not null, "amount_minor" int not null, "currency" varchar(3) not null, "rule" varchar(60) not null, "wording" text not null, "sum" text not null, "decided_by_id" uuid null, "decided_at" timestamptz not null, "state" text check ("state" in ('decided', 'sent', 'refused')) not null, "tries" int not null default 0, "provider_id" varchar(255) null, "problem" text null, constraint "refund_pkey" primary key ("id"));`);
    this.addSql(`alter table "refund" add constraint "refund_provider_id_unique" unique ("provider_id");`);
    this.addSql(`create index "refund_place_id_index" on "refund" ("place_id");`);
    this.addSql(`create index "refund_state_decided_at_index" on "refund" ("state", "decided_at");`);

    this.addSql(`create table "ledger_line" ("id" uuid not null, "place_id" uuid not null, "kind" text check ("kind" in ('card', 'card-refund', 'bank', 'bank-refund', 'moved-in', 'moved-out')) not null, "purpose" text check ("purpose" in ('deposit', 'balance', 'renewal')) not null, "amount_minor" int not null, "currency" varchar(3) not null, "payment_id" uuid null, "refund_id" uuid null, "reference" varchar(255) not null, "by_id" uuid null, "at" timestamptz not null, "written_at" timestamptz not null, constraint "ledger_line_pkey" primary key ("id"));`);
    this.addSql(`create index "ledger_line_place_id_index" on "ledger_line" ("place_id");`);
    this.addSql(`create index "ledger_line_at_id_index" on "ledger_line" ("at", "id");`);
    this.addSql(`alter table "ledger_line" add constraint "ledger_line_kind_reference_unique" unique ("kind", "reference");`);

    this.addSql(`create table "receipt" ("id" uuid not null, "number" int not null, "line_id" uuid not null, "key" varchar(200) null, "sha256" varchar(64) null, "issued_at" timestamptz not null, constraint "receipt_pkey" primary key ("id"));`);
    this.addSql(`alter table "receipt" add constraint "receipt_number_unique" unique ("number");`);
    this.addSql(`alter table "receipt" add constraint "receipt_line_id_unique" unique ("line_id");`);

    this.addSql(`create table "watch_position" ("id" uuid not null, "person_id" uuid not null, "asset_id" uuid not null, "seconds" double precision not null, "finished_at" timestamptz null, "updated_at" timestamptz not null, constraint "watch_position_pkey" primary key ("id"));`);
    this.addSql(`alter table "watch_position" add constraint "watch_position_person_id_asset_id_unique" unique ("person_id", "asset_id");`);

    this.addSql(`alter table "course_module" add constraint "course_module_course_id_foreign" foreign key ("course_id") references "course" ("id") on update cascade;`);

    this.addSql(`create table "safety_note" ("id" uuid not null, "person_id" uuid not null, "first_aid" text not null default '', "boot_size" varchar(10) not null default '', "changed_at" timestamptz not null, constraint "safety_note_pkey" primary key ("id"));`);
    this.addSql(`alter table "safety_note" add constraint "safety_note_person_id_unique" unique ("person_id");`);
    this.addSql(`alter table "safety_note" add constraint "safety_note_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "sharing_choice" add constraint "sharing_choice_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "media_asset" add constraint "media_asset_upload_id_foreign" foreign key ("upload_id") references "upload" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "media_asset" add constraint "media_asset_added_by_id_foreign" foreign key ("added_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "media_track" add constraint "media_track_asset_id_foreign" foreign key ("asset_id") references "media_asset" ("id") on update cascade;`);
    this.addSql(`alter table "media_track" add constraint "media_track_saved_by_id_foreign" foreign key ("saved_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "lesson_passage" add constraint "lesson_passage_lesson_id_foreign" foreign key ("lesson_id") references "lesson" ("id") on update cascade;`);
    this.addSql(`alter table "lesson_passage" add constraint "lesson_passage_clip_id_foreign" foreign key ("clip_id") references "media_asset" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "lesson_progress" add constraint "lesson_progress_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "lesson_progress" add constraint "lesson_progress_lesson_id_foreign" foreign key ("lesson_id") references "lesson" ("id") on update cascade;`);
    this.addSql(`alter table "lesson_progress" add constraint "lesson_progress_kept_id_foreign" foreign key ("kept_id") references "lesson_version" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "lesson_note" add constraint "lesson_note_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "lesson_note" add constraint "lesson_note_lesson_id_foreign" foreign key ("lesson_id") references "lesson" ("id") on update cascade;`);

    this.addSql(`alter table "lesson_draft" add constraint "lesson_draft_lesson_id_foreign" foreign key ("lesson_id") references "lesson" ("id") on update cascade;`);
    this.addSql(`alter table "lesson_draft" add constraint "lesson_draft_saved_by_id_foreign" foreign key ("saved_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "consent_text" add constraint "consent_text_saved_by_id_foreign" foreign key ("saved_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "consent" add constraint "consent_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "consent" add constraint "consent_text_id_foreign" foreign key ("text_id") references "consent_text" ("id") on update cascade;`);

    this.addSql(`alter table "purchase_order" add constraint "purchase_order_place_id_foreign" foreign key ("place_id") references "bench_place" ("id") on update cascade;`);
    this.addSql(`alter table "purchase_order" add constraint "purchase_order_sponsor_id_foreign" foreign key ("sponsor_id") references "sponsor" ("id") on update cascade;`);
    this.addSql(`alter table "purchase_order" add constraint "purchase_order_taken_by_id_foreign" foreign key ("taken_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "payment" add constraint "payment_place_id_foreign" foreign key ("place_id") references "bench_place" ("id") on update cascade;`);

    this.addSql(`alter table "refund" add constraint "refund_place_id_foreign" foreign key ("place_id") references "bench_place" ("id") on update cascade;`);
    this.addSql(`alter table "refund" add constraint "refund_payment_id_foreign" foreign key ("payment_id") references "payment" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "refund" add constraint "refund_decided_by_id_foreign" foreign key ("decided_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "ledger_line" add constraint "ledger_line_place_id_foreign" foreign key ("place_id") references "bench_place" ("id") on update cascade;`);
    this.addSql(`alter table "ledger_line" add constraint "ledger_line_payment_id_foreign" foreign key ("payment_id") references "payment" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "ledger_line" add constraint "ledger_line_refund_id_foreign" foreign key ("refund_id") references "refund" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "ledger_line" add constraint "ledger_line_by_id_foreign" foreign key ("by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "receipt" add constraint "receipt_line_id_foreign" foreign key ("line_id") references "ledger_line" ("id") on update cascade;`);

    this.addSql(`alter table "watch_position" add constraint "watch_position_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "watch_position" add constraint "watch_position_asset_id_foreign" foreign key ("asset_id") references "media_asset" ("id") on update cascade;`);

    this.addSql(`alter table "bench_place" drop constraint "bench_place_person_id_foreign";`);

    this.addSql(`alter table "cohort" add column "course_id" uuid null, add column "open" boolean not null default false, add column "price_minor" int not null default 0, add column "deposit_minor" int not null default 0, add column "currency" varchar(3) not null default 'GBP', add column "last_list_number" int not null default 0;`);
    this.addSql(`alter table "cohort" add constraint "cohort_course_id_foreign" foreign key ("course_id") references "course" ("id") on update cascade on delete set null;`);

    // Modules were words on the lessons; a school that has lessons gets one course with a module for each word.
    this.addSql(`insert into "course" ("id", "code", "title", "summary", "created_at") select gen_random_uuid(), 'head-porting', 'Cylinder-head porting', '', now() where exists (select 1 from "lesson");`);
    this.addSql(`insert into "course_module" ("id", "course_id", "number", "title", "outcome", "gates") select gen_random_uuid(), "course"."id", row_number() over (order by "first"), "module", '', '{}' from "course", (select "module", min("number") as "first" from "lesson" group by "module") as "words";`);
    this.addSql(`alter table "lesson" add column "module_id" uuid null;`);
    this.addSql(`update "lesson" set "module_id" = "course_module"."id" from "course_module" where "course_module"."title" = "lesson"."module";`);
    this.addSql(`alter table "lesson" alter column "module_id" set not null;`);
    this.addSql(`alter table "lesson" add column "revision" int not null default 0;`);
    this.addSql(`alter table "lesson" drop column "module";`);
    this.addSql(`alter table "lesson" add constraint "lesson_module_id_foreign" foreign key ("module_id") references "course_module" ("id") on update cascade;`);

    this.addSql(`alter table "mail" add column "attachments" jsonb null;`);

    this.addSql(`alter table "lesson_version" add column "title" varchar(160) not null default '', add column "document" jsonb not null default '{"type":"doc","content":[]}', add column "minutes" int not null default 1, add column "what_changed" text not null default '', add column "why" text not null default '', add column "published_by_id" uuid null;`);
    this.addSql(`alter table "lesson_version" disable trigger "lesson_version_never_changes";`);
    this.addSql(`update "lesson_version" set "title" = (select "title" from "lesson" where "lesson"."id" = "lesson_id"), "document" = jsonb_build_object('type', 'doc', 'content', coalesce((select jsonb_agg(jsonb_build_object('type', 'paragraph', 'content', jsonb_build_array(jsonb_build_object('type', 'text', 'text', "words")))) from regexp_split_to_table("markdown", '\\n\\s*\\n') as "words" where "words" <> ''), '[]'::jsonb));`);
    this.addSql(`alter table "lesson_version" enable trigger "lesson_version_never_changes";`);
    this.addSql(`alter table "lesson_version" drop column "markdown", alter column "title" drop default, alter column "document" drop default, alter column "minutes" drop default, alter column "what_changed" drop default, alter column "why" drop default;`);
    this.addSql(`create index "lesson_version_document" on "lesson_version" using gin ("document");`);
    this.addSql(`alter table "lesson_version" add constraint "lesson_version_published_by_id_foreign" foreign key ("published_by_id") references "app_user" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "bench_place" add column "name" varchar(120) not null default '', add column "email" varchar(254) not null default '', add column "note" text not null default '', add column "list_number" int null, add column "asked_at" timestamptz null, add column "opened_at" timestamptz null, add column "offered_at" timestamptz null, add column "held_until" timestamptz null, add column "offers_let_go" int not null default 0, add column "deposit_paid_at" timestamptz null, add column "confirmed_at" timestamptz null, add column "moved_from_id" uuid null, add column "ended_at" timestamptz null, add column "ended_because" varchar(40) null, add column "access_until" timestamptz null, add column "link_version" int not null default 1;`);
    this.addSql(`alter table "bench_place" alter column "person_id" drop default;`);
    this.addSql(`alter table "bench_place" alter column "person_id" type uuid using ("person_id"::text::uuid);`);
    this.addSql(`alter table "bench_place" alter column "person_id" drop not null;`);
    this.addSql(`alter table "bench_place" add constraint "bench_place_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade on delete set null;`);
    this.addSql(`create index "bench_place_state_held_until_index" on "bench_place" ("state", "held_until");`);
    this.addSql(`alter table "bench_place" drop constraint "bench_place_cohort_id_person_id_unique";`);
    this.addSql(`create index "bench_place_person_id_index" on "bench_place" ("person_id");`);
    this.addSql(`create unique index "bench_place_one_person" on "bench_place" ("cohort_id", "person_id") where "state" not in ('moved', 'cancelled', 'stopped');`);
    this.addSql(`create index "bench_place_email_index" on "bench_place" ("email");`);
    this.addSql(`create unique index "bench_place_one_offer" on "bench_place" (lower("email")) where "state" = 'offered' and "email" <> '';`);
    this.addSql(`create unique index "bench_place_one_ask" on "bench_place" ("cohort_id", lower("email")) where "state" in ('asked', 'offered', 'waiting-list', 'deposit-paid', 'confirmed', 'here') and "email" <> '';`);
    this.addSql(`alter table "bench_place" add constraint "bench_place_cohort_id_list_number_unique" unique ("cohort_id", "list_number");`);
  }

  override async down(): Promise<void> {
    // Documents cannot become Markdown again, nor money be forgotten.
    throw new Error('This migration is not taken back: restore a backup instead.')
  }

}
