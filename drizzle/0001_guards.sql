-- Rules the database itself keeps: history and money are append-only, a sent quote is frozen.
CREATE SEQUENCE IF NOT EXISTS commission_ref START 188;
--> statement-breakpoint
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only: write a correcting row instead', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;
--> statement-breakpoint
CREATE TRIGGER events_append_only BEFORE UPDATE OR DELETE ON events FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER events_no_truncate BEFORE TRUNCATE ON events FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_append_only BEFORE UPDATE OR DELETE ON ledger_entries FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_no_truncate BEFORE TRUNCATE ON ledger_entries FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER acceptances_append_only BEFORE UPDATE OR DELETE ON acceptances FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE FUNCTION keep_quote_frozen() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'a sent quote cannot be deleted' USING ERRCODE = 'restrict_violation';
  END IF;
  IF NEW.body IS DISTINCT FROM OLD.body OR NEW.sha256 <> OLD.sha256 OR NEW.revision <> OLD.revision
     OR NEW.commission_id <> OLD.commission_id OR NEW.terms_version <> OLD.terms_version
     OR NEW.valid_until <> OLD.valid_until OR NEW.sent_at <> OLD.sent_at THEN
    RAISE EXCEPTION 'a sent quote is frozen: send a new revision' USING ERRCODE = 'restrict_violation';
  END IF;
  IF OLD.state IN ('withdrawn', 'accepted') AND NEW.state <> OLD.state THEN
    RAISE EXCEPTION 'a % quote stays %', OLD.state, OLD.state USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER quotes_frozen BEFORE UPDATE OR DELETE ON quotes FOR EACH ROW EXECUTE FUNCTION keep_quote_frozen();
--> statement-breakpoint
CREATE UNIQUE INDEX quotes_one_live ON quotes (commission_id) WHERE state IN ('sent', 'accepted');
--> statement-breakpoint
CREATE FUNCTION keep_stage_sum() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' OR NEW.gross_minor <> OLD.gross_minor OR NEW.net_minor <> OLD.net_minor OR NEW.tax_minor <> OLD.tax_minor
     OR NEW.currency <> OLD.currency OR NEW.quote_id <> OLD.quote_id THEN
    RAISE EXCEPTION 'an agreed stage payment does not change' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER stage_payments_fixed BEFORE UPDATE OR DELETE ON stage_payments FOR EACH ROW EXECUTE FUNCTION keep_stage_sum();
--> statement-breakpoint
ALTER TABLE stage_payments ADD CONSTRAINT stage_payment_adds_up CHECK (gross_minor = net_minor + tax_minor AND gross_minor > 0);
--> statement-breakpoint
ALTER TABLE ledger_entries ADD CONSTRAINT ledger_sign CHECK ((kind = 'received' AND amount_minor > 0) OR (kind <> 'received' AND amount_minor <= 0));
--> statement-breakpoint
INSERT INTO number_series (series, last) VALUES ('receipt', 0) ON CONFLICT DO NOTHING;
