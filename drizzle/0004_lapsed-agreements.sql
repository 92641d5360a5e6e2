ALTER TABLE "acceptances" DROP CONSTRAINT "acceptances_commission_id_unique";--> statement-breakpoint
CREATE OR REPLACE FUNCTION keep_quote_frozen() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'a sent quote cannot be deleted' USING ERRCODE = 'restrict_violation';
  END IF;
  IF NEW.body IS DISTINCT FROM OLD.body OR NEW.sha256 <> OLD.sha256 OR NEW.revision <> OLD.revision
     OR NEW.commission_id <> OLD.commission_id OR NEW.terms_version <> OLD.terms_version
     OR NEW.valid_until <> OLD.valid_until OR NEW.sent_at <> OLD.sent_at THEN
    RAISE EXCEPTION 'a sent quote is frozen: send a new revision' USING ERRCODE = 'restrict_violation';
  END IF;
  -- An agreement whose first payment never came lapses; nothing else ever leaves withdrawn, accepted or lapsed.
  IF NEW.state <> OLD.state AND OLD.state <> 'sent' AND NOT (OLD.state = 'accepted' AND NEW.state = 'lapsed') THEN
    RAISE EXCEPTION 'a % quote stays %', OLD.state, OLD.state USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
