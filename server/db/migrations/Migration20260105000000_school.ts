import { Migration } from '@mikro-orm/migrations';

export class Migration20260105000000_school extends Migration {

  override async up(): Promise<void> {
    this.addSql(`create table "audit_event" ("id" uuid not null, "at" timestamptz not null, "actor" varchar(80) not null, "action" varchar(80) not null, "subject" varchar(120) not null, "detail" text not null, constraint "audit_event_pkey" primary key ("id"));`);
    this.addSql(`create index "audit_event_subject_index" on "audit_event" ("subject");`);

    this.addSql(`create table "audit_link" ("number" int not null, "event_id" uuid not null, "hash" varchar(64) not null, "linked_at" timestamptz not null, constraint "audit_link_pkey" primary key ("number"));`);
    this.addSql(`alter table "audit_link" add constraint "audit_link_event_id_unique" unique ("event_id");`);

    this.addSql(`create table "audit_seal" ("id" uuid not null, "number" int not null, "hash" varchar(64) not null, "at" timestamptz not null, "reason" varchar(120) not null, constraint "audit_seal_pkey" primary key ("id"));`);
    this.addSql(`create index "audit_seal_number_index" on "audit_seal" ("number");`);

    this.addSql(`create table "casting" ("id" uuid not null, "code" varchar(20) not null, "name" varchar(80) not null, "version" int not null, "card" jsonb not null, "created_at" timestamptz not null, constraint "casting_pkey" primary key ("id"));`);
    this.addSql(`alter table "casting" add constraint "casting_code_version_unique" unique ("code", "version");`);

    this.addSql(`create table "cohort" ("id" uuid not null, "code" varchar(20) not null, "name" varchar(80) not null, "starts_on" date not null, "ends_on" date not null, "pattern" text not null, "places" int not null, "created_at" timestamptz not null, constraint "cohort_pkey" primary key ("id"));`);
    this.addSql(`alter table "cohort" add constraint "cohort_code_unique" unique ("code");`);

    this.addSql(`create table "instrument" ("id" uuid not null, "code" varchar(60) not null, "name" varchar(120) not null, "quantities" text[] not null, "expanded_u" double precision not null, "relative" boolean not null default false, "unit" varchar(20) not null, "due_on" date null, "created_at" timestamptz not null, constraint "instrument_pkey" primary key ("id"));`);
    this.addSql(`alter table "instrument" add constraint "instrument_code_unique" unique ("code");`);

    this.addSql(`create table "lesson" ("id" uuid not null, "number" int not null, "slug" varchar(80) not null, "title" varchar(160) not null, "module" varchar(80) not null, "ops" integer[] not null, "created_at" timestamptz not null, constraint "lesson_pkey" primary key ("id"));`);
    this.addSql(`alter table "lesson" add constraint "lesson_number_unique" unique ("number");`);
    this.addSql(`alter table "lesson" add constraint "lesson_slug_unique" unique ("slug");`);

    this.addSql(`create table "lesson_version" ("id" uuid not null, "lesson_id" uuid not null, "version" int not null, "markdown" text not null, "published_at" timestamptz not null, constraint "lesson_version_pkey" primary key ("id"));`);
    this.addSql(`alter table "lesson_version" add constraint "lesson_version_lesson_id_version_unique" unique ("lesson_id", "version");`);

    this.addSql(`create table "scale_card" ("id" uuid not null, "number" varchar(20) not null, "bar_xmm" double precision not null, "bar_ymm" double precision not null, "thickness_mm" double precision not null, "created_at" timestamptz not null, constraint "scale_card_pkey" primary key ("id"));`);
    this.addSql(`alter table "scale_card" add constraint "scale_card_number_unique" unique ("number");`);

    this.addSql(`create table "school_setting" ("name" varchar(60) not null, "value" jsonb not null, constraint "school_setting_pkey" primary key ("name"));`);

    this.addSql(`create table "sign_in_failure" ("id" uuid not null, "subject" varchar(300) not null, "at" timestamptz not null, constraint "sign_in_failure_pkey" primary key ("id"));`);
    this.addSql(`create index "sign_in_failure_subject_at_index" on "sign_in_failure" ("subject", "at");`);

    this.addSql(`create table "app_user" ("id" uuid not null, "email" varchar(254) not null, "name" varchar(120) not null, "password_hash" text null, "roles" text[] not null, "unit" text check ("unit" in ('mm', 'in')) not null default 'mm', "hand_allowance_mm" double precision null, "created_at" timestamptz not null, constraint "app_user_pkey" primary key ("id"));`);
    this.addSql(`alter table "app_user" add constraint "app_user_email_unique" unique ("email");`);

    this.addSql(`create table "upload" ("id" uuid not null, "owner_id" uuid not null, "purpose" text check ("purpose" in ('photo', 'flow-sheet', 'document', 'lesson-media')) not null, "key" varchar(200) not null, "filename" varchar(255) not null, "bytes" bigint not null, "content_type" varchar(120) not null, "sha256" varchar(64) not null, "multipart_id" text null, "detected_type" varchar(120) null, "state" text check ("state" in ('open', 'received', 'used', 'refused')) not null default 'open', "created_at" timestamptz not null, "received_at" timestamptz null, "used_at" timestamptz null, "used_by" varchar(80) null, constraint "upload_pkey" primary key ("id"));`);
    this.addSql(`alter table "upload" add constraint "upload_key_unique" unique ("key");`);
    this.addSql(`create index "upload_owner_id_state_index" on "upload" ("owner_id", "state");`);
    this.addSql(`create index "upload_sha256_index" on "upload" ("sha256");`);
    this.addSql(`create index "upload_state_created_at_index" on "upload" ("state", "created_at");`);

    this.addSql(`create table "auth_session" ("id" uuid not null, "user_id" uuid not null, "created_at" timestamptz not null, "expires_at" timestamptz not null, "ended_at" timestamptz null, "agent" varchar(200) not null default '', constraint "auth_session_pkey" primary key ("id"));`);
    this.addSql(`create index "auth_session_user_id_ended_at_index" on "auth_session" ("user_id", "ended_at");`);

    this.addSql(`create table "rubric_version" ("id" uuid not null, "version" int not null, "rubric" jsonb not null, "note" text not null default '', "saved_by_id" uuid null, "saved_at" timestamptz not null, constraint "rubric_version_pkey" primary key ("id"));`);
    this.addSql(`alter table "rubric_version" add constraint "rubric_version_version_unique" unique ("version");`);

    this.addSql(`create table "practice_head" ("id" uuid not null, "number" varchar(20) not null, "student_id" uuid not null, "cohort_id" uuid null, "casting_id" uuid not null, "rubric_id" uuid not null, "state" text check ("state" in ('received', 'working', 'finished', 'scrapped', 'sawn')) not null default 'received', "acid_cleaned" boolean null, "first_cylinder" int not null default 1, "received_at" timestamptz not null, constraint "practice_head_pkey" primary key ("id"));`);
    this.addSql(`alter table "practice_head" add constraint "practice_head_number_unique" unique ("number");`);
    this.addSql(`create index "practice_head_student_id_index" on "practice_head" ("student_id");`);
    this.addSql(`create index "practice_head_cohort_id_index" on "practice_head" ("cohort_id");`);

    this.addSql(`create table "submission" ("id" uuid not null, "head_id" uuid not null, "op" int not null, "part" text check ("part" in ('before', 'first', 'rest')) not null, "point" varchar(20) null, "try_number" int not null default 1, "version" int not null default 1, "state" text check ("state" in ('draft', 'asked', 'scored', 'decided')) not null default 'draft', "ports" jsonb not null, "note" text not null default '', "started_by_id" uuid not null, "created_at" timestamptz not null, "asked_at" timestamptz null, "scored_version" int null, "scored_at" timestamptz null, "decided_at" timestamptz null, "decision" text check ("decision" in ('release', 'send-back', 'stop')) null, "score" double precision null, "word" varchar(20) null, "stop_stands" boolean not null default false, constraint "submission_pkey" primary key ("id"));`);
    this.addSql(`create index "submission_waiting" on "submission" ("stop_stands" desc, "asked_at", "id") where "state" in ('asked', 'scored');`);
    this.addSql(`alter table "submission" add constraint "submission_head_id_op_part_try_number_unique" unique ("head_id", "op", "part", "try_number");`);

    this.addSql(`create table "score_set" ("id" uuid not null, "submission_id" uuid not null, "version" int not null, "score" double precision null, "word" varchar(20) not null, "rests_on" jsonb not null, "scored_at" timestamptz not null, constraint "score_set_pkey" primary key ("id"));`);
    this.addSql(`alter table "score_set" add constraint "score_set_submission_id_version_unique" unique ("submission_id", "version");`);

    this.addSql(`create table "criterion_result" ("id" uuid not null, "set_id" uuid not null, "criterion" varchar(10) not null, "cylinder" int null, "side" text check ("side" in ('intake', 'exhaust')) null, "at" varchar(120) null, "lift_mm" double precision null, "state" varchar(20) not null, "value" double precision null, "unit" varchar(30) not null, "expanded_uncertainty" double precision null, "p_conform" double precision null, "metal_left" jsonb null, "text" text not null, "trace" jsonb not null, "band" jsonb null, "typed_for_photo" boolean not null default false, "position" int not null, constraint "criterion_result_pkey" primary key ("id"));`);
    this.addSql(`alter table "criterion_result" add constraint "criterion_result_set_id_position_unique" unique ("set_id", "position");`);

    this.addSql(`create table "review" ("id" uuid not null, "submission_id" uuid not null, "seen_version" int not null, "by_id" uuid not null, "at" timestamptz not null, "decision" text check ("decision" in ('release', 'send-back', 'stop')) not null, "point" varchar(20) null, "condition" text null, "feedback" text not null default '', "sentences" jsonb not null, "reasons" jsonb not null, "read_at" timestamptz null, constraint "review_pkey" primary key ("id"));`);
    this.addSql(`create index "review_submission_id_index" on "review" ("submission_id");`);

    this.addSql(`create table "reading" ("id" uuid not null, "submission_id" uuid not null, "quantity" varchar(60) not null, "cylinder" int null, "side" text check ("side" in ('intake', 'exhaust')) null, "at" jsonb null, "when" text check ("when" in ('before', 'after')) null, "as_typed" text[] not null, "unit" varchar(20) not null, "values" double precision[] not null, "base_unit" varchar(20) not null, "instrument_id" uuid not null, "expanded_u" double precision not null, "added_by_id" uuid not null, "taken_at" timestamptz not null, "recorded_at" timestamptz not null, "voids" uuid null, "voided_at" timestamptz null, constraint "reading_pkey" primary key ("id"));`);
    this.addSql(`create index "reading_submission_id_index" on "reading" ("submission_id");`);

    this.addSql(`create table "point_release" ("id" uuid not null, "head_id" uuid not null, "point" varchar(20) not null, "review_id" uuid not null, "by_id" uuid not null, "at" timestamptz not null, "rests_on" jsonb not null, "conditions" jsonb not null, "condition" text null, "shut_again_at" timestamptz null, constraint "point_release_pkey" primary key ("id"));`);
    this.addSql(`alter table "point_release" add constraint "point_release_review_id_unique" unique ("review_id");`);
    this.addSql(`create index "point_release_head_id_point_index" on "point_release" ("head_id", "point");`);
    this.addSql(`alter table "point_release" add constraint "point_release_head_id_point_by_id_review_id_unique" unique ("head_id", "point", "by_id", "review_id");`);

    this.addSql(`create table "photo" ("id" uuid not null, "submission_id" uuid not null, "upload_id" uuid not null, "view" varchar(20) not null, "cylinder" int null, "side" text check ("side" in ('intake', 'exhaust')) null, "spot" varchar(80) null, "card_id" uuid null, "seat_depth" jsonb null, "clock_mark" double precision null, "state" text check ("state" in ('taken', 'being-measured', 'cannot-use', 'measured', 'reviewed')) not null default 'taken', "problem" text null, "width" int null, "height" int null, "thumb_key" varchar(200) null, "preview_key" varchar(200) null, "added_by_id" uuid not null, "taken_at" timestamptz not null, "set_aside_at" timestamptz null, constraint "photo_pkey" primary key ("id"));`);
    this.addSql(`alter table "photo" add constraint "photo_upload_id_unique" unique ("upload_id");`);
    this.addSql(`create index "photo_submission_id_index" on "photo" ("submission_id");`);

    this.addSql(`create table "photo_pin" ("id" uuid not null, "review_id" uuid not null, "photo_id" uuid not null, "number" int not null, "x" double precision not null, "y" double precision not null, "criterion" varchar(10) not null, "text" text not null default '', constraint "photo_pin_pkey" primary key ("id"));`);
    this.addSql(`alter table "photo_pin" add constraint "photo_pin_review_id_number_unique" unique ("review_id", "number");`);

    this.addSql(`create table "password_token" ("id" uuid not null, "user_id" uuid not null, "purpose" text check ("purpose" in ('reset', 'invitation')) not null, "secret_hash" varchar(64) not null, "expires_at" timestamptz not null, "used_at" timestamptz null, "created_at" timestamptz not null, constraint "password_token_pkey" primary key ("id"));`);
    this.addSql(`alter table "password_token" add constraint "password_token_secret_hash_unique" unique ("secret_hash");`);

    this.addSql(`create table "result_override" ("id" uuid not null, "review_id" uuid not null, "result_id" uuid not null, "state" text check ("state" in ('accept', 'borderline', 'reject')) not null, "reason" text not null, "by_id" uuid not null, "at" timestamptz not null, constraint "result_override_pkey" primary key ("id"));`);
    this.addSql(`alter table "result_override" add constraint "result_override_review_id_result_id_unique" unique ("review_id", "result_id");`);

    this.addSql(`create table "mail" ("id" uuid not null, "key" varchar(160) not null, "template" varchar(60) not null, "person_id" uuid null, "to" varchar(254) not null, "subject" varchar(200) not null, "html" text not null, "text" text not null, "state" text check ("state" in ('waiting', 'sent', 'dead')) not null default 'waiting', "tries" int not null default 0, "message_id" varchar(200) not null, "provider_id" text null, "problem" text null, "created_at" timestamptz not null, "sent_at" timestamptz null, constraint "mail_pkey" primary key ("id"));`);
    this.addSql(`alter table "mail" add constraint "mail_key_unique" unique ("key");`);
    this.addSql(`create index "mail_state_created_at_index" on "mail" ("state", "created_at");`);
    this.addSql(`create index "mail_person_id_index" on "mail" ("person_id");`);

    this.addSql(`create table "idempotency_key" ("id" uuid not null, "person_id" uuid not null, "key" uuid not null, "route" varchar(200) not null, "body_hash" varchar(64) not null, "status" int not null, "answer" jsonb not null, "at" timestamptz not null, constraint "idempotency_key_pkey" primary key ("id"));`);
    this.addSql(`alter table "idempotency_key" add constraint "idempotency_key_person_id_key_unique" unique ("person_id", "key");`);

    this.addSql(`create table "head_stop" ("id" uuid not null, "head_id" uuid not null, "by_id" uuid not null, "at" timestamptz not null, "criterion" varchar(10) null, "point" varchar(20) null, "where" varchar(200) not null, "reason" text not null, "lifted_by_id" uuid null, "lifted_at" timestamptz null, "lift_reason" text null, constraint "head_stop_pkey" primary key ("id"));`);
    this.addSql(`create index "head_stop_head_id_lifted_at_index" on "head_stop" ("head_id", "lifted_at");`);

    this.addSql(`create table "flow_sheet" ("id" uuid not null, "submission_id" uuid not null, "upload_id" uuid not null, "state" text check ("state" in ('raw', 'read', 'asked', 'used', 'set-aside')) not null default 'raw', "added_by_id" uuid not null, "added_at" timestamptz not null, constraint "flow_sheet_pkey" primary key ("id"));`);
    this.addSql(`alter table "flow_sheet" add constraint "flow_sheet_upload_id_unique" unique ("upload_id");`);
    this.addSql(`create index "flow_sheet_submission_id_index" on "flow_sheet" ("submission_id");`);

    this.addSql(`create table "flow_sheet_reading" ("id" uuid not null, "sheet_id" uuid not null, "version" int not null, "kind" text check ("kind" in ('flow', 'plate-log')) not null, "bench" varchar(60) null, "header" jsonb not null, "runs" jsonb not null, "columns" jsonb not null, "first_rows" jsonb not null, "findings" jsonb not null, "needs" jsonb not null, "plate_log" jsonb null, "answers" jsonb not null, "method" varchar(40) not null, "read_at" timestamptz not null, constraint "flow_sheet_reading_pkey" primary key ("id"));`);
    this.addSql(`alter table "flow_sheet_reading" add constraint "flow_sheet_reading_sheet_id_version_unique" unique ("sheet_id", "version");`);

    this.addSql(`create table "evidence_document" ("id" uuid not null, "submission_id" uuid not null, "upload_id" uuid not null, "note" varchar(200) not null default '', "added_by_id" uuid not null, "added_at" timestamptz not null, "set_aside_at" timestamptz null, constraint "evidence_document_pkey" primary key ("id"));`);
    this.addSql(`alter table "evidence_document" add constraint "evidence_document_upload_id_unique" unique ("upload_id");`);
    this.addSql(`create index "evidence_document_submission_id_index" on "evidence_document" ("submission_id");`);

    this.addSql(`create table "cohort_staff" ("id" uuid not null, "cohort_id" uuid not null, "person_id" uuid not null, "points" text[] not null, "posts" text[] not null, "from" timestamptz not null, "until" timestamptz null, "given_by_id" uuid null, constraint "cohort_staff_pkey" primary key ("id"));`);
    this.addSql(`create index "cohort_staff_person_id_cohort_id_index" on "cohort_staff" ("person_id", "cohort_id");`);

    this.addSql(`create table "clearance" ("id" uuid not null, "person_id" uuid not null, "tool" varchar(40) not null, "from" timestamptz not null, "until" timestamptz not null, "given_by_id" uuid not null, "withdrawn_at" timestamptz null, constraint "clearance_pkey" primary key ("id"));`);
    this.addSql(`create index "clearance_person_id_tool_index" on "clearance" ("person_id", "tool");`);

    this.addSql(`create table "bench_place" ("id" uuid not null, "cohort_id" uuid not null, "person_id" uuid not null, "state" text check ("state" in ('asked', 'offered', 'deposit-paid', 'confirmed', 'here', 'finished', 'waiting-list', 'moved', 'cancelled', 'stopped')) not null, "slot" int null, "created_at" timestamptz not null, "finished_at" timestamptz null, constraint "bench_place_pkey" primary key ("id"));`);
    this.addSql(`alter table "bench_place" add constraint "bench_place_cohort_id_person_id_unique" unique ("cohort_id", "person_id");`);
    this.addSql(`create unique index "bench_place_slot_taken" on "bench_place" ("cohort_id", "slot") where "state" in ('offered', 'deposit-paid', 'confirmed', 'here');`);

    this.addSql(`create table "witness_call" ("id" uuid not null, "head_id" uuid not null, "point" varchar(20) not null, "told_by_id" uuid not null, "told_at" timestamptz not null, "wait_until" timestamptz not null, "seen_by_id" uuid null, "seen_at" timestamptz null, constraint "witness_call_pkey" primary key ("id"));`);
    this.addSql(`alter table "witness_call" add constraint "witness_call_head_id_point_unique" unique ("head_id", "point");`);

    this.addSql(`alter table "audit_link" add constraint "audit_link_event_id_foreign" foreign key ("event_id") references "audit_event" ("id") on update cascade;`);

    this.addSql(`alter table "lesson_version" add constraint "lesson_version_lesson_id_foreign" foreign key ("lesson_id") references "lesson" ("id") on update cascade;`);

    this.addSql(`alter table "upload" add constraint "upload_owner_id_foreign" foreign key ("owner_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "auth_session" add constraint "auth_session_user_id_foreign" foreign key ("user_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "rubric_version" add constraint "rubric_version_saved_by_id_foreign" foreign key ("saved_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "practice_head" add constraint "practice_head_student_id_foreign" foreign key ("student_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "practice_head" add constraint "practice_head_cohort_id_foreign" foreign key ("cohort_id") references "cohort" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "practice_head" add constraint "practice_head_casting_id_foreign" foreign key ("casting_id") references "casting" ("id") on update cascade;`);
    this.addSql(`alter table "practice_head" add constraint "practice_head_rubric_id_foreign" foreign key ("rubric_id") references "rubric_version" ("id") on update cascade;`);

    this.addSql(`alter table "submission" add constraint "submission_head_id_foreign" foreign key ("head_id") references "practice_head" ("id") on update cascade;`);
    this.addSql(`alter table "submission" add constraint "submission_started_by_id_foreign" foreign key ("started_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "score_set" add constraint "score_set_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);

    this.addSql(`alter table "criterion_result" add constraint "criterion_result_set_id_foreign" foreign key ("set_id") references "score_set" ("id") on update cascade;`);

    this.addSql(`alter table "review" add constraint "review_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);
    this.addSql(`alter table "review" add constraint "review_by_id_foreign" foreign key ("by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "reading" add constraint "reading_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);
    this.addSql(`alter table "reading" add constraint "reading_instrument_id_foreign" foreign key ("instrument_id") references "instrument" ("id") on update cascade;`);
    this.addSql(`alter table "reading" add constraint "reading_added_by_id_foreign" foreign key ("added_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "point_release" add constraint "point_release_head_id_foreign" foreign key ("head_id") references "practice_head" ("id") on update cascade;`);
    this.addSql(`alter table "point_release" add constraint "point_release_review_id_foreign" foreign key ("review_id") references "review" ("id") on update cascade;`);
    this.addSql(`alter table "point_release" add constraint "point_release_by_id_foreign" foreign key ("by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "photo" add constraint "photo_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);
    this.addSql(`alter table "photo" add constraint "photo_upload_id_foreign" foreign key ("upload_id") references "upload" ("id") on update cascade;`);
    this.addSql(`alter table "photo" add constraint "photo_card_id_foreign" foreign key ("card_id") references "scale_card" ("id") on update cascade on delete set null;`);
    this.addSql(`alter table "photo" add constraint "photo_added_by_id_foreign" foreign key ("added_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "photo_pin" add constraint "photo_pin_review_id_foreign" foreign key ("review_id") references "review" ("id") on update cascade;`);
    this.addSql(`alter table "photo_pin" add constraint "photo_pin_photo_id_foreign" foreign key ("photo_id") references "photo" ("id") on update cascade;`);

    this.addSql(`alter table "password_token" add constraint "password_token_user_id_foreign" foreign key ("user_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "result_override" add constraint "result_override_review_id_foreign" foreign key ("review_id") references "review" ("id") on update cascade;`);
    this.addSql(`alter table "result_override" add constraint "result_override_result_id_foreign" foreign key ("result_id") references "criterion_result" ("id") on update cascade;`);
    this.addSql(`alter table "result_override" add constraint "result_override_by_id_foreign" foreign key ("by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "mail" add constraint "mail_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "idempotency_key" add constraint "idempotency_key_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "head_stop" add constraint "head_stop_head_id_foreign" foreign key ("head_id") references "practice_head" ("id") on update cascade;`);
    this.addSql(`alter table "head_stop" add constraint "head_stop_by_id_foreign" foreign key ("by_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "head_stop" add constraint "head_stop_lifted_by_id_foreign" foreign key ("lifted_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "flow_sheet" add constraint "flow_sheet_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);
    this.addSql(`alter table "flow_sheet" add constraint "flow_sheet_upload_id_foreign" foreign key ("upload_id") references "upload" ("id") on update cascade;`);
    this.addSql(`alter table "flow_sheet" add constraint "flow_sheet_added_by_id_foreign" foreign key ("added_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "flow_sheet_reading" add constraint "flow_sheet_reading_sheet_id_foreign" foreign key ("sheet_id") references "flow_sheet" ("id") on update cascade;`);

    this.addSql(`alter table "evidence_document" add constraint "evidence_document_submission_id_foreign" foreign key ("submission_id") references "submission" ("id") on update cascade;`);
    this.addSql(`alter table "evidence_document" add constraint "evidence_document_upload_id_foreign" foreign key ("upload_id") references "upload" ("id") on update cascade;`);
    this.addSql(`alter table "evidence_document" add constraint "evidence_document_added_by_id_foreign" foreign key ("added_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "cohort_staff" add constraint "cohort_staff_cohort_id_foreign" foreign key ("cohort_id") references "cohort" ("id") on update cascade;`);
    this.addSql(`alter table "cohort_staff" add constraint "cohort_staff_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "cohort_staff" add constraint "cohort_staff_given_by_id_foreign" foreign key ("given_by_id") references "app_user" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "clearance" add constraint "clearance_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "clearance" add constraint "clearance_given_by_id_foreign" foreign key ("given_by_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "bench_place" add constraint "bench_place_cohort_id_foreign" foreign key ("cohort_id") references "cohort" ("id") on update cascade;`);
    this.addSql(`alter table "bench_place" add constraint "bench_place_person_id_foreign" foreign key ("person_id") references "app_user" ("id") on update cascade;`);

    this.addSql(`alter table "witness_call" add constraint "witness_call_head_id_foreign" foreign key ("head_id") references "practice_head" ("id") on update cascade;`);
    this.addSql(`alter table "witness_call" add constraint "witness_call_told_by_id_foreign" foreign key ("told_by_id") references "app_user" ("id") on update cascade;`);
    this.addSql(`alter table "witness_call" add constraint "witness_call_seen_by_id_foreign" foreign key ("seen_by_id") references "app_user" ("id") on update cascade on delete set null;`);
  }

}
