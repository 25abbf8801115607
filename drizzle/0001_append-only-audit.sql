CREATE TRIGGER `audit_log_no_update` BEFORE UPDATE ON `audit_log`
BEGIN
  SELECT RAISE(ABORT, 'The audit log is append-only.');
END;
--> statement-breakpoint
CREATE TRIGGER `audit_log_no_delete` BEFORE DELETE ON `audit_log`
BEGIN
  SELECT RAISE(ABORT, 'The audit log is append-only.');
END;

--> statement-breakpoint
CREATE TRIGGER `event_revisions_no_update` BEFORE UPDATE ON `event_revisions`
BEGIN
  SELECT RAISE(ABORT, 'Revisions of a mark are append-only.');
END;
--> statement-breakpoint
CREATE TRIGGER `event_revisions_no_delete` BEFORE DELETE ON `event_revisions`
BEGIN
  SELECT RAISE(ABORT, 'Revisions of a mark are append-only.');
END;
