-- The audit log only grows: no statement of the server may change or take away an entry.
CREATE TRIGGER `audit_log_keeps_entries` BEFORE UPDATE ON `audit_log`
BEGIN
	SELECT RAISE(ABORT, 'the audit log is append-only');
END;
--> statement-breakpoint
CREATE TRIGGER `audit_log_loses_none` BEFORE DELETE ON `audit_log`
BEGIN
	SELECT RAISE(ABORT, 'the audit log is append-only');
END;
