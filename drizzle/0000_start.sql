CREATE TYPE "public"."deal_state" AS ENUM('enquiry', 'asking', 'estimated', 'quoted', 'agreed', 'booked', 'making', 'held', 'finished', 'sent', 'delivered', 'issue', 'rework', 'lost', 'closed', 'declined', 'lapsed', 'cancelled');--> statement-breakpoint
CREATE TYPE "public"."upload_kind" AS ENUM('picture', 'document', 'mesh', 'step');--> statement-breakpoint
CREATE TYPE "public"."attempt_result" AS ENUM('sound', 'scrapped', 'second');--> statement-breakpoint
CREATE TYPE "public"."piece_stage" AS ENUM('waiting', 'pattern', 'mould', 'poured', 'sound', 'fettled', 'hardened', 'finished', 'patinated', 'hafted', 'inspected', 'packed');--> statement-breakpoint
CREATE TYPE "public"."role" AS ENUM('customer', 'maker', 'owner', 'bookkeeper');--> statement-breakpoint
CREATE TYPE "public"."ledger_kind" AS ENUM('received', 'refund', 'fee', 'credit', 'written-off');--> statement-breakpoint
CREATE TYPE "public"."quote_state" AS ENUM('sent', 'withdrawn', 'accepted', 'lapsed');--> statement-breakpoint
CREATE TYPE "public"."stage_trigger" AS ENUM('acceptance', 'gate-a', 'before-dispatch', 'after-delivery', 'rework');--> statement-breakpoint
CREATE TYPE "public"."mail_state" AS ENUM('queued', 'sent', 'delivered', 'bounced', 'failed');--> statement-breakpoint
CREATE TABLE "commissions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"ref" text NOT NULL,
	"deal" "deal_state" DEFAULT 'enquiry' NOT NULL,
	"deal_before" "deal_state",
	"customer_id" uuid,
	"email" text NOT NULL,
	"customer_name" text NOT NULL,
	"phone" text,
	"confirmed_at" timestamp with time zone,
	"browser_id" text,
	"client_id" text,
	"title" text NOT NULL,
	"form_slug" text,
	"alloy" text NOT NULL,
	"family" text NOT NULL,
	"pieces" integer NOT NULL,
	"bladed" boolean DEFAULT false NOT NULL,
	"enquiry" jsonb NOT NULL,
	"estimate_request" jsonb NOT NULL,
	"estimate" jsonb NOT NULL,
	"owner_estimate" jsonb,
	"currency" text DEFAULT 'GBP' NOT NULL,
	"destination" text NOT NULL,
	"needed_by" date,
	"leaves_from" date,
	"leaves_to" date,
	"held_until" date,
	"decline_reason" text,
	"buyer" jsonb,
	"shipping" jsonb,
	"dispatch" jsonb,
	"created_at" timestamp with time zone NOT NULL,
	"updated_at" timestamp with time zone NOT NULL,
	CONSTRAINT "commissions_ref_unique" UNIQUE("ref"),
	CONSTRAINT "commissions_client_id_unique" UNIQUE("client_id")
);
--> statement-breakpoint
CREATE TABLE "events" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"at" timestamp with time zone NOT NULL,
	"code" text NOT NULL,
	"actor_id" uuid,
	"actor_role" text NOT NULL,
	"from_state" text,
	"to_state" text,
	"sentence" text NOT NULL,
	"public" boolean DEFAULT false NOT NULL,
	"data" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "messages" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"client_id" text NOT NULL,
	"author_id" uuid,
	"author_role" "role" NOT NULL,
	"body" text NOT NULL,
	"at" timestamp with time zone NOT NULL,
	CONSTRAINT "messages_client_id_unique" UNIQUE("client_id")
);
--> statement-breakpoint
CREATE TABLE "questions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"round" integer NOT NULL,
	"position" integer NOT NULL,
	"text" text NOT NULL,
	"why" text NOT NULL,
	"required" boolean DEFAULT true NOT NULL,
	"answer" text,
	"answered_at" timestamp with time zone,
	"asked_at" timestamp with time zone NOT NULL,
	CONSTRAINT "questions_place" UNIQUE("commission_id","round","position")
);
--> statement-breakpoint
CREATE TABLE "tray" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid,
	"problem" jsonb NOT NULL,
	"data" jsonb NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"settled_at" timestamp with time zone,
	"settled_by" uuid
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"id" uuid PRIMARY KEY NOT NULL,
	"client_id" text NOT NULL,
	"browser_id" text NOT NULL,
	"owner_id" uuid,
	"commission_id" uuid,
	"kind" "upload_kind" NOT NULL,
	"display_name" text NOT NULL,
	"mime" text NOT NULL,
	"bytes" integer NOT NULL,
	"sha256" text NOT NULL,
	"storage_key" text NOT NULL,
	"thumb_key" text,
	"measure" jsonb,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "uploads_client" UNIQUE("browser_id","client_id")
);
--> statement-breakpoint
CREATE TABLE "attempts" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"piece_id" uuid,
	"number" integer NOT NULL,
	"family" text NOT NULL,
	"mould_no" text,
	"heat_no" text,
	"poured_mass_g" integer,
	"cast_mass_g" integer,
	"result" "attempt_result",
	"cause" text,
	"cause_note" text,
	"found_at" text,
	"mould_at" timestamp with time zone NOT NULL,
	"poured_at" timestamp with time zone,
	"closed_at" timestamp with time zone,
	"by" uuid,
	CONSTRAINT "attempts_number" UNIQUE("commission_id","number")
);
--> statement-breakpoint
CREATE TABLE "gates" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"gate" text NOT NULL,
	"round" integer DEFAULT 1 NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"photo_set_sha256" text NOT NULL,
	"photo_ids" uuid[] NOT NULL,
	"note" text,
	"opened_at" timestamp with time zone NOT NULL,
	"decided_at" timestamp with time zone,
	"decided_by" uuid,
	CONSTRAINT "gates_round" UNIQUE("commission_id","gate","round")
);
--> statement-breakpoint
CREATE TABLE "minutes_log" (
	"id" uuid PRIMARY KEY NOT NULL,
	"client_id" text NOT NULL,
	"commission_id" uuid NOT NULL,
	"piece_id" uuid,
	"operation" text NOT NULL,
	"minutes" integer NOT NULL,
	"by" uuid NOT NULL,
	"at" timestamp with time zone NOT NULL,
	CONSTRAINT "minutes_log_client_id_unique" UNIQUE("client_id")
);
--> statement-breakpoint
CREATE TABLE "photos" (
	"id" uuid PRIMARY KEY NOT NULL,
	"client_id" text NOT NULL,
	"commission_id" uuid NOT NULL,
	"piece_id" uuid,
	"attempt_id" uuid,
	"stage" text NOT NULL,
	"caption" text NOT NULL,
	"alt" text DEFAULT '' NOT NULL,
	"sha256" text NOT NULL,
	"files" jsonb NOT NULL,
	"shared" boolean DEFAULT true NOT NULL,
	"taken_at" timestamp with time zone NOT NULL,
	"by" uuid,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "photos_client_id_unique" UNIQUE("client_id")
);
--> statement-breakpoint
CREATE TABLE "pieces" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"route" "piece_stage"[] NOT NULL,
	"stage" "piece_stage" DEFAULT 'waiting' NOT NULL,
	"target_mass_g" integer,
	"tolerance_g" integer,
	"measured" jsonb,
	"updated_at" timestamp with time zone NOT NULL,
	CONSTRAINT "pieces_number" UNIQUE("commission_id","number")
);
--> statement-breakpoint
CREATE TABLE "timers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"by" uuid NOT NULL,
	"operation" text NOT NULL,
	"started_at" timestamp with time zone NOT NULL,
	CONSTRAINT "timers_one" UNIQUE("commission_id","by")
);
--> statement-breakpoint
CREATE TABLE "accounts" (
	"user_id" uuid NOT NULL,
	"type" text NOT NULL,
	"provider" text NOT NULL,
	"provider_account_id" text NOT NULL,
	"refresh_token" text,
	"access_token" text,
	"expires_at" integer,
	"token_type" text,
	"scope" text,
	"id_token" text,
	"session_state" text,
	CONSTRAINT "accounts_provider_provider_account_id_pk" PRIMARY KEY("provider","provider_account_id")
);
--> statement-breakpoint
CREATE TABLE "form_returns" (
	"id" uuid PRIMARY KEY NOT NULL,
	"browser_id" text NOT NULL,
	"values" jsonb NOT NULL,
	"problem" jsonb NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"email" text PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"role" "role" NOT NULL,
	"invited_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"accepted_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"key" text PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" bigint
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"session_token" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"expires" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sign_in_requests" (
	"id" uuid PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"code_hash" text NOT NULL,
	"sealed_token" text NOT NULL,
	"next" text DEFAULT '/' NOT NULL,
	"tries_left" integer DEFAULT 5 NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text,
	"given_name" text,
	"email" text NOT NULL,
	"email_verified" timestamp with time zone,
	"image" text,
	"phone" text,
	"role" "role" DEFAULT 'customer' NOT NULL,
	"active" boolean DEFAULT true NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "users_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "verification_tokens" (
	"identifier" text NOT NULL,
	"token" text NOT NULL,
	"expires" timestamp with time zone NOT NULL,
	CONSTRAINT "verification_tokens_identifier_token_pk" PRIMARY KEY("identifier","token")
);
--> statement-breakpoint
CREATE TABLE "acceptances" (
	"quote_id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"quote_sha256" text NOT NULL,
	"terms_version" text NOT NULL,
	"terms_sha256" text NOT NULL,
	"typed_name" text NOT NULL,
	"accepted_by" uuid NOT NULL,
	"address" text NOT NULL,
	"declarations" jsonb NOT NULL,
	"accepted_at" timestamp with time zone NOT NULL,
	CONSTRAINT "acceptances_commission_id_unique" UNIQUE("commission_id")
);
--> statement-breakpoint
CREATE TABLE "checkout_sessions" (
	"id" text PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"stage_payment_id" uuid NOT NULL,
	"quote_id" uuid NOT NULL,
	"amount_minor" integer NOT NULL,
	"currency" text NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"url" text NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "ledger_entries" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"stage_payment_id" uuid,
	"kind" "ledger_kind" NOT NULL,
	"amount_minor" integer NOT NULL,
	"currency" text NOT NULL,
	"provider_id" text NOT NULL,
	"receipt_no" integer,
	"cause" jsonb NOT NULL,
	"at" timestamp with time zone NOT NULL,
	CONSTRAINT "ledger_entries_provider_id_unique" UNIQUE("provider_id"),
	CONSTRAINT "ledger_entries_receipt_no_unique" UNIQUE("receipt_no")
);
--> statement-breakpoint
CREATE TABLE "number_series" (
	"series" text PRIMARY KEY NOT NULL,
	"last" integer DEFAULT 0 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "quote_drafts" (
	"commission_id" uuid PRIMARY KEY NOT NULL,
	"draft" jsonb NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"updated_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "quotes" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"state" "quote_state" NOT NULL,
	"body" jsonb NOT NULL,
	"sha256" text NOT NULL,
	"terms_version" text NOT NULL,
	"valid_until" timestamp with time zone NOT NULL,
	"sent_at" timestamp with time zone NOT NULL,
	"withdrawn_at" timestamp with time zone,
	"closed_at" timestamp with time zone,
	"sent_by" uuid,
	CONSTRAINT "quotes_revision" UNIQUE("commission_id","revision")
);
--> statement-breakpoint
CREATE TABLE "stage_payments" (
	"id" uuid PRIMARY KEY NOT NULL,
	"commission_id" uuid NOT NULL,
	"quote_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"label" text NOT NULL,
	"trigger" "stage_trigger" NOT NULL,
	"currency" text NOT NULL,
	"net_minor" integer NOT NULL,
	"tax_minor" integer NOT NULL,
	"gross_minor" integer NOT NULL,
	"due_at" timestamp with time zone,
	CONSTRAINT "stage_payments_place" UNIQUE("quote_id","position")
);
--> statement-breakpoint
CREATE TABLE "stripe_events" (
	"id" text PRIMARY KEY NOT NULL,
	"type" text NOT NULL,
	"object_id" text NOT NULL,
	"outcome" text NOT NULL,
	"received_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "mails" (
	"id" uuid PRIMARY KEY NOT NULL,
	"letter" text NOT NULL,
	"to" text NOT NULL,
	"commission_id" uuid,
	"data" jsonb NOT NULL,
	"cause" text NOT NULL,
	"state" "mail_state" DEFAULT 'queued' NOT NULL,
	"subject" text,
	"html" text,
	"text" text,
	"provider_id" text,
	"tries" integer DEFAULT 0 NOT NULL,
	"last_error" text,
	"not_before" timestamp with time zone,
	"created_at" timestamp with time zone NOT NULL,
	"sent_at" timestamp with time zone,
	"settled_at" timestamp with time zone,
	CONSTRAINT "mails_cause_unique" UNIQUE("cause"),
	CONSTRAINT "mails_provider_id_unique" UNIQUE("provider_id")
);
--> statement-breakpoint
CREATE TABLE "rate_versions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"rates" jsonb NOT NULL,
	"set_by" uuid,
	"created_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "studio_settings" (
	"id" text PRIMARY KEY DEFAULT 'studio' NOT NULL,
	"settings" jsonb NOT NULL
);
--> statement-breakpoint
ALTER TABLE "commissions" ADD CONSTRAINT "commissions_customer_id_users_id_fk" FOREIGN KEY ("customer_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_actor_id_users_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "messages" ADD CONSTRAINT "messages_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "messages" ADD CONSTRAINT "messages_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "questions" ADD CONSTRAINT "questions_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tray" ADD CONSTRAINT "tray_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tray" ADD CONSTRAINT "tray_settled_by_users_id_fk" FOREIGN KEY ("settled_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_owner_id_users_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attempts" ADD CONSTRAINT "attempts_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attempts" ADD CONSTRAINT "attempts_piece_id_pieces_id_fk" FOREIGN KEY ("piece_id") REFERENCES "public"."pieces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attempts" ADD CONSTRAINT "attempts_by_users_id_fk" FOREIGN KEY ("by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "gates" ADD CONSTRAINT "gates_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "gates" ADD CONSTRAINT "gates_decided_by_users_id_fk" FOREIGN KEY ("decided_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "minutes_log" ADD CONSTRAINT "minutes_log_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "minutes_log" ADD CONSTRAINT "minutes_log_piece_id_pieces_id_fk" FOREIGN KEY ("piece_id") REFERENCES "public"."pieces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "minutes_log" ADD CONSTRAINT "minutes_log_by_users_id_fk" FOREIGN KEY ("by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_piece_id_pieces_id_fk" FOREIGN KEY ("piece_id") REFERENCES "public"."pieces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_attempt_id_attempts_id_fk" FOREIGN KEY ("attempt_id") REFERENCES "public"."attempts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_by_users_id_fk" FOREIGN KEY ("by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pieces" ADD CONSTRAINT "pieces_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "timers" ADD CONSTRAINT "timers_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "timers" ADD CONSTRAINT "timers_by_users_id_fk" FOREIGN KEY ("by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_invited_by_users_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acceptances" ADD CONSTRAINT "acceptances_quote_id_quotes_id_fk" FOREIGN KEY ("quote_id") REFERENCES "public"."quotes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acceptances" ADD CONSTRAINT "acceptances_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acceptances" ADD CONSTRAINT "acceptances_accepted_by_users_id_fk" FOREIGN KEY ("accepted_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "checkout_sessions" ADD CONSTRAINT "checkout_sessions_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "checkout_sessions" ADD CONSTRAINT "checkout_sessions_stage_payment_id_stage_payments_id_fk" FOREIGN KEY ("stage_payment_id") REFERENCES "public"."stage_payments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "checkout_sessions" ADD CONSTRAINT "checkout_sessions_quote_id_quotes_id_fk" FOREIGN KEY ("quote_id") REFERENCES "public"."quotes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_entries_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_entries_stage_payment_id_stage_payments_id_fk" FOREIGN KEY ("stage_payment_id") REFERENCES "public"."stage_payments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quote_drafts" ADD CONSTRAINT "quote_drafts_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quotes" ADD CONSTRAINT "quotes_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quotes" ADD CONSTRAINT "quotes_sent_by_users_id_fk" FOREIGN KEY ("sent_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stage_payments" ADD CONSTRAINT "stage_payments_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "stage_payments" ADD CONSTRAINT "stage_payments_quote_id_quotes_id_fk" FOREIGN KEY ("quote_id") REFERENCES "public"."quotes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mails" ADD CONSTRAINT "mails_commission_id_commissions_id_fk" FOREIGN KEY ("commission_id") REFERENCES "public"."commissions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rate_versions" ADD CONSTRAINT "rate_versions_set_by_users_id_fk" FOREIGN KEY ("set_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "commissions_customer" ON "commissions" USING btree ("customer_id");--> statement-breakpoint
CREATE INDEX "commissions_deal" ON "commissions" USING btree ("deal");--> statement-breakpoint
CREATE INDEX "events_commission" ON "events" USING btree ("commission_id","id");--> statement-breakpoint
CREATE INDEX "messages_commission" ON "messages" USING btree ("commission_id","at");--> statement-breakpoint
CREATE INDEX "uploads_commission" ON "uploads" USING btree ("commission_id");--> statement-breakpoint
CREATE INDEX "attempts_family" ON "attempts" USING btree ("family","result");--> statement-breakpoint
CREATE INDEX "minutes_commission" ON "minutes_log" USING btree ("commission_id");--> statement-breakpoint
CREATE INDEX "photos_commission" ON "photos" USING btree ("commission_id","taken_at");--> statement-breakpoint
CREATE INDEX "sessions_user" ON "sessions" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "sign_in_requests_email" ON "sign_in_requests" USING btree ("email");--> statement-breakpoint
CREATE INDEX "checkout_stage" ON "checkout_sessions" USING btree ("stage_payment_id");--> statement-breakpoint
CREATE INDEX "ledger_commission" ON "ledger_entries" USING btree ("commission_id");--> statement-breakpoint
CREATE INDEX "stage_payments_commission" ON "stage_payments" USING btree ("commission_id");--> statement-breakpoint
CREATE INDEX "mails_commission" ON "mails" USING btree ("commission_id");--> statement-breakpoint
CREATE INDEX "mails_state" ON "mails" USING btree ("state");