CREATE TRIGGER `ledger_entries_no_update` BEFORE UPDATE ON `ledger_entries` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'ledger entries are never changed; post a new entry';
--> statement-breakpoint
CREATE TRIGGER `ledger_entries_no_delete` BEFORE DELETE ON `ledger_entries` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'ledger entries are never deleted; post a new entry';
--> statement-breakpoint
CREATE TRIGGER `ledger_transfers_no_update` BEFORE UPDATE ON `ledger_transfers` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'ledger transfers are never changed; post a new entry';
--> statement-breakpoint
CREATE TRIGGER `ledger_transfers_no_delete` BEFORE DELETE ON `ledger_transfers` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'ledger transfers are never deleted; post a new entry';
--> statement-breakpoint
CREATE TRIGGER `licence_records_no_update` BEFORE UPDATE ON `licence_records` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'licence records are never changed; add a status event';
--> statement-breakpoint
CREATE TRIGGER `licence_records_no_delete` BEFORE DELETE ON `licence_records` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'licence records are never deleted';
--> statement-breakpoint
CREATE TRIGGER `audit_log_no_update` BEFORE UPDATE ON `audit_log` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the audit log is never changed';
--> statement-breakpoint
CREATE TRIGGER `audit_log_no_delete` BEFORE DELETE ON `audit_log` FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the audit log is never deleted';
