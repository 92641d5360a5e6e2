ALTER TYPE "public"."mail_state" ADD VALUE 'complained' BEFORE 'failed';--> statement-breakpoint
ALTER TABLE "mails" ADD COLUMN "bounce" text;--> statement-breakpoint
ALTER TABLE "mails" ADD COLUMN "again_of" uuid;--> statement-breakpoint
ALTER TABLE "mails" ADD CONSTRAINT "mails_again_of_mails_id_fk" FOREIGN KEY ("again_of") REFERENCES "public"."mails"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "mails_to" ON "mails" USING btree ("to");