CREATE TABLE `companies` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(200) NOT NULL,
	`address` varchar(500) NOT NULL,
	`country_code` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`tax_number` varchar(30) character set ascii collate ascii_bin,
	`version` int NOT NULL DEFAULT 1,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `companies_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `confirmed_names` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`legal_name` varchar(200) NOT NULL,
	`credit_name` varchar(200) NOT NULL,
	`ipi` varchar(11) character set ascii collate ascii_bin,
	`society` varchar(60),
	`confirmed_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`confirmed_at` datetime(3) NOT NULL,
	CONSTRAINT `confirmed_names_id` PRIMARY KEY(`id`),
	CONSTRAINT `confirmed_names_once` UNIQUE(`library_id`,`person_id`),
	CONSTRAINT `confirmed_names_ipi` UNIQUE(`library_id`,`ipi`)
);
--> statement-breakpoint
CREATE TABLE `invitations` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`email` varchar(254) NOT NULL,
	`name` varchar(200) NOT NULL,
	`role` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`company_id` varchar(40) character set ascii collate ascii_bin,
	`scope_name` varchar(200) NOT NULL,
	`may_approve` boolean NOT NULL DEFAULT false,
	`granted` json NOT NULL,
	`ends_at` datetime(3),
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`invited_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`accepted_at` datetime(3),
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `invitations_id` PRIMARY KEY(`id`),
	CONSTRAINT `invitations_token` UNIQUE(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `memberships` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`role` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`company_id` varchar(40) character set ascii collate ascii_bin,
	`scope_name` varchar(200) NOT NULL,
	`may_approve` boolean NOT NULL DEFAULT false,
	`granted` json NOT NULL,
	`ends_at` datetime(3),
	`last_used_at` datetime(3),
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `memberships_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `people` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`email` varchar(254) NOT NULL,
	`name` varchar(200) NOT NULL,
	`password_hash` varchar(255) character set ascii collate ascii_bin,
	`totp_secret` varchar(255) character set ascii collate ascii_bin,
	`totp_pending_secret` varchar(255) character set ascii collate ascii_bin,
	`totp_confirmed_at` datetime(3),
	`totp_last_step` int,
	`email_verified_at` datetime(3),
	`link_used_at` datetime(3),
	`session_version` int NOT NULL DEFAULT 1,
	`disabled_at` datetime(3),
	`time_zone` varchar(60) character set ascii collate ascii_bin NOT NULL DEFAULT 'Etc/UTC',
	`demo` boolean NOT NULL DEFAULT false,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `people_id` PRIMARY KEY(`id`),
	CONSTRAINT `people_email` UNIQUE(`email`)
);
--> statement-breakpoint
CREATE TABLE `sign_in_attempts` (
	`subject_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`window_start` datetime(3) NOT NULL,
	`attempts` int NOT NULL,
	`next_at` datetime(3) NOT NULL,
	CONSTRAINT `sign_in_attempts_subject_hash` PRIMARY KEY(`subject_hash`)
);
--> statement-breakpoint
CREATE TABLE `sign_in_links` (
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`email` varchar(254) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	CONSTRAINT `sign_in_links_token_hash` PRIMARY KEY(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `catalogue_events` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin,
	`happened_at` datetime(3) NOT NULL,
	`words` varchar(300) NOT NULL,
	`from_state` varchar(12) character set ascii collate ascii_bin,
	`to_state` varchar(12) character set ascii collate ascii_bin,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	CONSTRAINT `catalogue_events_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `families` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`catalogue_number` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`title` varchar(200) NOT NULL,
	`other_titles` json NOT NULL,
	`iswc` varchar(11) character set ascii collate ascii_bin,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`deal` varchar(14) character set ascii collate ascii_bin NOT NULL,
	`bpm` double,
	`musical_key` varchar(20),
	`genre` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`voice` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`voice_language` varchar(12) character set ascii collate ascii_bin,
	`ending` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`shape` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`density` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`description` varchar(400) NOT NULL,
	`keywords` json NOT NULL,
	`sections` json NOT NULL,
	`explicit_content` varchar(8) character set ascii collate ascii_bin NOT NULL DEFAULT 'none',
	`year_recorded` int,
	`restricted_territories` json NOT NULL,
	`refused_uses` json NOT NULL,
	`search_text` text NOT NULL,
	`head_recording_id` varchar(40) character set ascii collate ascii_bin,
	`demo` boolean NOT NULL DEFAULT false,
	`created_at` datetime(3) NOT NULL,
	`accepted_at` datetime(3),
	`listed_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `families_id` PRIMARY KEY(`id`),
	CONSTRAINT `families_number` UNIQUE(`catalogue_number`),
	CONSTRAINT `families_library_title` UNIQUE(`library_id`,`title`)
);
--> statement-breakpoint
CREATE TABLE `family_terms` (
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`term` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	CONSTRAINT `family_terms_family_id_kind_term_pk` PRIMARY KEY(`family_id`,`kind`,`term`)
);
--> statement-breakpoint
CREATE TABLE `holds` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`cause` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`cause_id` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`reason` varchar(500) NOT NULL,
	`since_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	CONSTRAINT `holds_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `libraries` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`code` varchar(4) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(200) NOT NULL,
	`place` varchar(200) NOT NULL,
	`country_code` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`time_zone` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`publisher_ipi` varchar(11) character set ascii collate ascii_bin NOT NULL,
	`composer_pool_bps` int NOT NULL,
	`character_note` varchar(300) NOT NULL,
	`last_number` int NOT NULL DEFAULT 0,
	`version` int NOT NULL DEFAULT 1,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `libraries_id` PRIMARY KEY(`id`),
	CONSTRAINT `libraries_code` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `licensed_masters` (
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`size_bytes` int NOT NULL,
	`duration_samples` int NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `licensed_masters_recording_id` PRIMARY KEY(`recording_id`)
);
--> statement-breakpoint
CREATE TABLE `recordings` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`version_role` varchar(60) NOT NULL,
	`position` int NOT NULL,
	`isrc` varchar(12) character set ascii collate ascii_bin,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`ending` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`file_name` varchar(255) NOT NULL,
	`file_sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`sample_rate_hz` int NOT NULL,
	`bit_depth` int NOT NULL,
	`channels` int NOT NULL,
	`duration_s` double NOT NULL,
	`loudness_lufs` double,
	`true_peak_dbtp` double,
	`loudness_range_lu` double,
	`bpm_measured` double,
	`key_measured` varchar(20),
	`contour` mediumblob,
	`sound_features` mediumblob,
	`section_loudness` json,
	`preview_key` varchar(120) character set ascii collate ascii_bin,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `recordings_id` PRIMARY KEY(`id`),
	CONSTRAINT `recordings_isrc` UNIQUE(`isrc`)
);
--> statement-breakpoint
CREATE TABLE `split_shares` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`split_version_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`side` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`name` varchar(200) NOT NULL,
	`ipi` varchar(11) character set ascii collate ascii_bin,
	`role` varchar(4) character set ascii collate ascii_bin NOT NULL,
	`share_bps` int NOT NULL,
	`accepted_at` datetime(3),
	CONSTRAINT `split_shares_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `split_versions` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`version` int NOT NULL,
	`valid_from` datetime(3) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `split_versions_id` PRIMARY KEY(`id`),
	CONSTRAINT `split_versions_once` UNIQUE(`family_id`,`version`)
);
--> statement-breakpoint
CREATE TABLE `declarations` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`delivery_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`version` int NOT NULL,
	`text_version` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`answers` json NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`signed_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`signed_name` varchar(200) NOT NULL,
	`signed_at` datetime(3) NOT NULL,
	CONSTRAINT `declarations_id` PRIMARY KEY(`id`),
	CONSTRAINT `declarations_once` UNIQUE(`delivery_id`,`version`)
);
--> statement-breakpoint
CREATE TABLE `deliveries` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`deliverer_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`deliverer_kind` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin,
	`title` varchar(200) NOT NULL,
	`draft` json NOT NULL,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`writers_accepted_at` datetime(3),
	`editorial_accepted_at` datetime(3),
	`editorial_accepted_by` varchar(40) character set ascii collate ascii_bin,
	`version` int NOT NULL DEFAULT 1,
	`created_at` datetime(3) NOT NULL,
	`updated_at` datetime(3) NOT NULL,
	`delivered_at` datetime(3),
	CONSTRAINT `deliveries_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `delivery_events` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`delivery_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`version_id` varchar(40) character set ascii collate ascii_bin,
	`happened_at` datetime(3) NOT NULL,
	`from_state` varchar(12) character set ascii collate ascii_bin,
	`to_state` varchar(12) character set ascii collate ascii_bin,
	`words` text NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`codes` json NOT NULL,
	CONSTRAINT `delivery_events_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `delivery_versions` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`delivery_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`file_name` varchar(255) NOT NULL,
	`size_bytes` bigint NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin,
	`version_role` varchar(60) NOT NULL,
	`isrc` varchar(12) character set ascii collate ascii_bin,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`state_words` varchar(500) NOT NULL,
	`facts` json,
	`measures` json,
	`checks` json,
	`contour` mediumblob,
	`sound_features` mediumblob,
	`recording_id` varchar(40) character set ascii collate ascii_bin,
	`replaced_by` varchar(40) character set ascii collate ascii_bin,
	`arrived_at` datetime(3) NOT NULL,
	CONSTRAINT `delivery_versions_id` PRIMARY KEY(`id`),
	CONSTRAINT `delivery_versions_file` UNIQUE(`file_key`)
);
--> statement-breakpoint
CREATE TABLE `delivery_writers` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`delivery_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`name` varchar(200) NOT NULL,
	`email` varchar(254),
	`ipi` varchar(11) character set ascii collate ascii_bin,
	`role` varchar(4) character set ascii collate ascii_bin NOT NULL,
	`share_bps` int NOT NULL,
	`state` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`asked_at` datetime(3),
	`answered_at` datetime(3),
	`answer_until` datetime(3),
	CONSTRAINT `delivery_writers_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`dedupe_key` varchar(160) character set ascii collate ascii_bin,
	`payload` json NOT NULL,
	`state` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`priority` int NOT NULL,
	`run_at` datetime(3) NOT NULL,
	`business_at` datetime(3),
	`lease_token` varchar(40) character set ascii collate ascii_bin,
	`lease_until` datetime(3),
	`attempts` int NOT NULL DEFAULT 0,
	`attempts_max` int NOT NULL,
	`progress` json,
	`last_error` text,
	`created_at` datetime(3) NOT NULL,
	`finished_at` datetime(3),
	CONSTRAINT `jobs_id` PRIMARY KEY(`id`),
	CONSTRAINT `jobs_dedupe` UNIQUE(`dedupe_key`)
);
--> statement-breakpoint
CREATE TABLE `mail_outbox` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`to_address` varchar(254) NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`template` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`props` json NOT NULL,
	`subject_id` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`provider_id` varchar(80) character set ascii collate ascii_bin,
	`created_at` datetime(3) NOT NULL,
	`sent_at` datetime(3),
	CONSTRAINT `mail_outbox_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `stored_files` (
	`key` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`slug` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`name` varchar(255) NOT NULL,
	`mime` varchar(120) NOT NULL,
	`size_bytes` bigint NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin,
	`uploader_id` varchar(40) character set ascii collate ascii_bin,
	`owner_kind` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`owner_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `stored_files_key` PRIMARY KEY(`key`)
);
--> statement-breakpoint
CREATE TABLE `tickets` (
	`token_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`purpose` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`subject_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`used_at` datetime(3),
	CONSTRAINT `tickets_token_hash` PRIMARY KEY(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `audit_log` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`operation_id` varchar(120) character set ascii collate ascii_bin NOT NULL,
	`verb` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`actor_kind` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`actor_person_id` varchar(40) character set ascii collate ascii_bin,
	`actor_scope` varchar(60) character set ascii collate ascii_bin,
	`subject` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`detail` json NOT NULL,
	`result` text NOT NULL,
	`request_id` varchar(60) character set ascii collate ascii_bin,
	`business_at` datetime(3) NOT NULL,
	`system_at` datetime(3) NOT NULL,
	CONSTRAINT `audit_log_id` PRIMARY KEY(`id`),
	CONSTRAINT `audit_log_operation` UNIQUE(`operation_id`)
);
--> statement-breakpoint
CREATE TABLE `settings` (
	`name` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`value` json NOT NULL,
	`note` varchar(300),
	CONSTRAINT `settings_name` PRIMARY KEY(`name`)
);
--> statement-breakpoint
CREATE TABLE `advances` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`amount_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`paid_at` datetime(3) NOT NULL,
	CONSTRAINT `advances_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `ledger_accounts` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`holder_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `ledger_accounts_id` PRIMARY KEY(`id`),
	CONSTRAINT `ledger_accounts_once` UNIQUE(`kind`,`holder_id`,`currency`),
	CONSTRAINT `ledger_accounts_currency` UNIQUE(`id`,`currency`)
);
--> statement-breakpoint
CREATE TABLE `ledger_entries` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`idempotency_key` varchar(160) character set ascii collate ascii_bin NOT NULL,
	`content_sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`code` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`words` varchar(300) NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`reverses` varchar(40) character set ascii collate ascii_bin,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`order_id` varchar(40) character set ascii collate ascii_bin,
	`processor_source` varchar(80) character set ascii collate ascii_bin,
	`facts` json NOT NULL,
	`actor_kind` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`actor_person_id` varchar(40) character set ascii collate ascii_bin,
	`event_at` datetime(3) NOT NULL,
	`posted_at` datetime(3) NOT NULL,
	CONSTRAINT `ledger_entries_id` PRIMARY KEY(`id`),
	CONSTRAINT `ledger_entries_key` UNIQUE(`idempotency_key`),
	CONSTRAINT `ledger_entries_currency` UNIQUE(`id`,`currency`)
);
--> statement-breakpoint
CREATE TABLE `ledger_transfers` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`entry_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`debit_account_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`credit_account_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`amount_minor` bigint NOT NULL,
	`order_line_id` varchar(40) character set ascii collate ascii_bin,
	`licence_number` varchar(24) character set ascii collate ascii_bin,
	`family_id` varchar(40) character set ascii collate ascii_bin,
	`production_id` varchar(40) character set ascii collate ascii_bin,
	`share_bps` int,
	CONSTRAINT `ledger_transfers_id` PRIMARY KEY(`id`),
	CONSTRAINT `ledger_transfers_positive` CHECK(`ledger_transfers`.`amount_minor` > 0),
	CONSTRAINT `ledger_transfers_two` CHECK(`ledger_transfers`.`debit_account_id` <> `ledger_transfers`.`credit_account_id`)
);
--> statement-breakpoint
CREATE TABLE `payees` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`holder_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`processor_account` varchar(60) character set ascii collate ascii_bin,
	`legal_name` varchar(200) NOT NULL,
	`country_code` varchar(2) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`bank_ref` varchar(60) character set ascii collate ascii_bin,
	`bank_last4` varchar(4) character set ascii collate ascii_bin,
	`bank_changed_at` datetime(3),
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `payees_id` PRIMARY KEY(`id`),
	CONSTRAINT `payees_once` UNIQUE(`kind`,`holder_id`)
);
--> statement-breakpoint
CREATE TABLE `payment_events` (
	`id` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`type` varchar(60) character set ascii collate ascii_bin NOT NULL,
	`payload` json NOT NULL,
	`received_at` datetime(3) NOT NULL,
	CONSTRAINT `payment_events_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `payout_runs` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`prepared_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`prepared_at` datetime(3) NOT NULL,
	`released_by` varchar(40) character set ascii collate ascii_bin,
	`released_at` datetime(3),
	`confirmed_by` varchar(40) character set ascii collate ascii_bin,
	`confirmed_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `payout_runs_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `payouts` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`run_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`holder_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`payee_id` varchar(40) character set ascii collate ascii_bin,
	`amount_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`reason` varchar(300) NOT NULL,
	`processor_transfer` varchar(60) character set ascii collate ascii_bin,
	`entry_id` varchar(40) character set ascii collate ascii_bin,
	`paid_at` datetime(3),
	CONSTRAINT `payouts_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `day_roots` (
	`day` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`leaves` json NOT NULL,
	`root` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`previous_root` varchar(64) character set ascii collate ascii_bin,
	`canonical` text NOT NULL,
	`key_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`signature` varchar(200) character set ascii collate ascii_bin NOT NULL,
	`published_at` datetime(3) NOT NULL,
	CONSTRAINT `day_roots_day` PRIMARY KEY(`day`)
);
--> statement-breakpoint
CREATE TABLE `invoices` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`order_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`refers_to` varchar(40) character set ascii collate ascii_bin,
	`body` json NOT NULL,
	`issued_at` datetime(3) NOT NULL,
	CONSTRAINT `invoices_id` PRIMARY KEY(`id`),
	CONSTRAINT `invoices_number` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `licence_records` (
	`number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`proof_code` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`origin` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`order_line_id` varchar(40) character set ascii collate ascii_bin,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`company_id` varchar(40) character set ascii collate ascii_bin,
	`production_id` varchar(40) character set ascii collate ascii_bin,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`canonical` text NOT NULL,
	`confidential` json NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`key_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`signature` varchar(200) character set ascii collate ascii_bin NOT NULL,
	`last_use_at` datetime(3),
	`issued_at` datetime(3) NOT NULL,
	CONSTRAINT `licence_records_number` PRIMARY KEY(`number`),
	CONSTRAINT `licence_records_proof` UNIQUE(`proof_code`),
	CONSTRAINT `licence_records_line` UNIQUE(`order_line_id`)
);
--> statement-breakpoint
CREATE TABLE `licence_status_events` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`licence_number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`sequence` int NOT NULL,
	`status` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`words` varchar(500) NOT NULL,
	`effective_at` datetime(3) NOT NULL,
	`recorded_at` datetime(3) NOT NULL,
	`canonical` text NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	CONSTRAINT `licence_status_events_id` PRIMARY KEY(`id`),
	CONSTRAINT `licence_status_events_once` UNIQUE(`licence_number`,`sequence`)
);
--> statement-breakpoint
CREATE TABLE `licence_visibility` (
	`licence_number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`withheld` json NOT NULL,
	`changed_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`changed_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `licence_visibility_licence_number` PRIMARY KEY(`licence_number`)
);
--> statement-breakpoint
CREATE TABLE `master_downloads` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`licence_number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `master_downloads_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `number_series` (
	`name` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`last` int NOT NULL,
	CONSTRAINT `number_series_name` PRIMARY KEY(`name`)
);
--> statement-breakpoint
CREATE TABLE `order_lines` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`order_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_ids` json NOT NULL,
	`use_scope` json NOT NULL,
	`price` json NOT NULL,
	`net_minor` bigint NOT NULL,
	`tax_minor` bigint NOT NULL,
	`split_version_id` varchar(40) character set ascii collate ascii_bin,
	`licence_number` varchar(24) character set ascii collate ascii_bin,
	CONSTRAINT `order_lines_id` PRIMARY KEY(`id`),
	CONSTRAINT `order_lines_once` UNIQUE(`order_id`,`number`)
);
--> statement-breakpoint
CREATE TABLE `order_refunds` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`order_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`line_ids` json NOT NULL,
	`amount_minor` bigint NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`words` varchar(500) NOT NULL,
	`state` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`payment_intent` varchar(80) character set ascii collate ascii_bin NOT NULL,
	`processor_refund` varchar(80) character set ascii collate ascii_bin,
	`asked_by` varchar(40) character set ascii collate ascii_bin,
	`asked_at` datetime(3) NOT NULL,
	`done_at` datetime(3),
	CONSTRAINT `order_refunds_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `orders` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`company_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`production_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`currency` varchar(3) character set ascii collate ascii_bin NOT NULL,
	`net_minor` bigint NOT NULL,
	`tax_minor` bigint NOT NULL,
	`gross_minor` bigint NOT NULL,
	`tax_words` varchar(300) NOT NULL,
	`state` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`state_words` varchar(500) NOT NULL,
	`licensee` json NOT NULL,
	`acceptance` json,
	`checkout_attempt` int NOT NULL DEFAULT 0,
	`checkout_session` varchar(120) character set ascii collate ascii_bin,
	`payment_intent` varchar(80) character set ascii collate ascii_bin,
	`placed_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`approved_by` varchar(40) character set ascii collate ascii_bin,
	`issued_at` datetime(3),
	`placed_at` datetime(3) NOT NULL,
	`paid_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `orders_id` PRIMARY KEY(`id`),
	CONSTRAINT `orders_number` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `rate_cards` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`version` int NOT NULL,
	`card` json NOT NULL,
	`valid_from` datetime(3) NOT NULL,
	`created_by` varchar(40) character set ascii collate ascii_bin,
	CONSTRAINT `rate_cards_id` PRIMARY KEY(`id`),
	CONSTRAINT `rate_cards_once` UNIQUE(`library_id`,`version`)
);
--> statement-breakpoint
CREATE TABLE `record_log` (
	`day` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	`kind` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`licence_number` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`leaf` text NOT NULL,
	CONSTRAINT `record_log_day_position_pk` PRIMARY KEY(`day`,`position`)
);
--> statement-breakpoint
CREATE TABLE `record_log_head` (
	`name` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`published_through` varchar(10) character set ascii collate ascii_bin,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `record_log_head_name` PRIMARY KEY(`name`)
);
--> statement-breakpoint
CREATE TABLE `signing_keys` (
	`key_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`public_key` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`valid_from` datetime(3) NOT NULL,
	`valid_until` datetime(3),
	CONSTRAINT `signing_keys_key_id` PRIMARY KEY(`key_id`)
);
--> statement-breakpoint
CREATE TABLE `productions` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`company_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`title` varchar(200) NOT NULL,
	`code_name` varchar(80),
	`episode` varchar(120),
	`kind` varchar(60) NOT NULL,
	`client` varchar(200),
	`default_use` json,
	`created_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `productions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `search_features` (
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`packed` mediumblob NOT NULL,
	CONSTRAINT `search_features_recording_id` PRIMARY KEY(`recording_id`)
);
--> statement-breakpoint
CREATE TABLE `shortlist_items` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`production_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`position` int NOT NULL,
	`state` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`note` varchar(500) NOT NULL,
	`price_snapshot` json,
	`added_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`added_at` datetime(3) NOT NULL,
	CONSTRAINT `shortlist_items_id` PRIMARY KEY(`id`),
	CONSTRAINT `shortlist_items_once` UNIQUE(`production_id`,`family_id`)
);
--> statement-breakpoint
CREATE TABLE `notice_events` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`notice_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`words` varchar(500) NOT NULL,
	`visible_to_reporter` boolean NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `notice_events_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `notices` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`receipt_number` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`access_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`contact` mediumblob NOT NULL,
	`email_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`email_confirmed_at` datetime(3),
	`claim` json NOT NULL,
	`state` varchar(16) character set ascii collate ascii_bin NOT NULL,
	`outcome` varchar(20) character set ascii collate ascii_bin,
	`reasons` text,
	`decided_by` varchar(40) character set ascii collate ascii_bin,
	`decided_at` datetime(3),
	`target_family_id` varchar(40) character set ascii collate ascii_bin,
	`confidential_key` varchar(120) character set ascii collate ascii_bin,
	`reported_work_id` varchar(40) character set ascii collate ascii_bin,
	`received_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `notices_id` PRIMARY KEY(`id`),
	CONSTRAINT `notices_receipt` UNIQUE(`receipt_number`)
);
--> statement-breakpoint
CREATE TABLE `report_limits` (
	`subject_hash` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`day` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`count` int NOT NULL,
	CONSTRAINT `report_limits_subject_hash_day_pk` PRIMARY KEY(`subject_hash`,`day`)
);
--> statement-breakpoint
CREATE TABLE `reported_works` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`code` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`title` varchar(200) NOT NULL,
	`concerns` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`owner` varchar(200) NOT NULL,
	`level` varchar(12) character set ascii collate ascii_bin NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin,
	`duration_s` double,
	`fingerprinted` boolean NOT NULL DEFAULT false,
	`notice_id` varchar(40) character set ascii collate ascii_bin,
	`added_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`review_at` datetime(3) NOT NULL,
	`removed_at` datetime(3),
	`created_at` datetime(3) NOT NULL,
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `reported_works_id` PRIMARY KEY(`id`),
	CONSTRAINT `reported_works_code` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `aligned_listenings` (
	`passage_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`hit_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin,
	`render_facts` json,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `aligned_listenings_passage_id` PRIMARY KEY(`passage_id`)
);
--> statement-breakpoint
CREATE TABLE `case_groups` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`case_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`reference_kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`reference_key` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`hit_ids` json NOT NULL,
	`relation` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`outside_library` boolean NOT NULL,
	CONSTRAINT `case_groups_id` PRIMARY KEY(`id`),
	CONSTRAINT `case_groups_once` UNIQUE(`case_id`,`reference_kind`,`reference_key`)
);
--> statement-breakpoint
CREATE TABLE `case_messages` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`case_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`author_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`words` text NOT NULL,
	`passage_ids` json NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin,
	`answer_until` datetime(3),
	`at` datetime(3) NOT NULL,
	CONSTRAINT `case_messages_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `cases` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`delivery_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`delivering_library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`state` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`holder_id` varchar(40) character set ascii collate ascii_bin,
	`papers_opened_at` datetime(3),
	`due_at` datetime(3) NOT NULL,
	`opened_at` datetime(3) NOT NULL,
	`closed_at` datetime(3),
	`version` int NOT NULL DEFAULT 1,
	CONSTRAINT `cases_id` PRIMARY KEY(`id`),
	CONSTRAINT `cases_number` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `confirmations` (
	`finding_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`confirmer_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`confirmed` boolean NOT NULL,
	`words` text NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `confirmations_finding_id` PRIMARY KEY(`finding_id`)
);
--> statement-breakpoint
CREATE TABLE `conflicts_declared` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`case_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`words` varchar(500) NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `conflicts_declared_id` PRIMARY KEY(`id`),
	CONSTRAINT `conflicts_declared_once` UNIQUE(`case_id`,`person_id`)
);
--> statement-breakpoint
CREATE TABLE `disclosures` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`case_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`subject_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `disclosures_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `findings` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`case_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`group_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`outcome` varchar(24) character set ascii collate ascii_bin NOT NULL,
	`explained_by` varchar(24) character set ascii collate ascii_bin,
	`codes` json NOT NULL,
	`reasons` text NOT NULL,
	`not_decided` text NOT NULL,
	`knowing` boolean,
	`knowing_because` text,
	`alternatives` json NOT NULL,
	`decider_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`decided_at` datetime(3) NOT NULL,
	`needs_second` boolean NOT NULL,
	`superseded_by` varchar(40) character set ascii collate ascii_bin,
	CONSTRAINT `findings_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `upheld_findings` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`finding_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`from_at` datetime(3) NOT NULL,
	`through_at` datetime(3) NOT NULL,
	`removed_at` datetime(3),
	CONSTRAINT `upheld_findings_id` PRIMARY KEY(`id`),
	CONSTRAINT `upheld_findings_finding` UNIQUE(`finding_id`)
);
--> statement-breakpoint
CREATE TABLE `certificates` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`run_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`body` json NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`issued_at` datetime(3) NOT NULL,
	CONSTRAINT `certificates_id` PRIMARY KEY(`id`),
	CONSTRAINT `certificates_run` UNIQUE(`run_id`)
);
--> statement-breakpoint
CREATE TABLE `hits` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`run_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`reference_kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`reference_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`reference_family_id` varchar(40) character set ascii collate ascii_bin,
	`reference_library_id` varchar(40) character set ascii collate ascii_bin,
	`relation` varchar(20) character set ascii collate ascii_bin NOT NULL,
	`band` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`explained_by` varchar(24) character set ascii collate ascii_bin,
	`explanation` varchar(500),
	`evidence` double NOT NULL,
	`evidence2` double NOT NULL,
	`chance` double,
	`speed` double NOT NULL,
	`pitch_semitones` double NOT NULL,
	`coverage_recording` double NOT NULL,
	`coverage_reference` double NOT NULL,
	`channel` varchar(5) character set ascii collate ascii_bin NOT NULL,
	`reversed` boolean NOT NULL,
	`low_distinctiveness` boolean NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `hits_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `index_head` (
	`name` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`seq` int NOT NULL,
	CONSTRAINT `index_head_name` PRIMARY KEY(`name`)
);
--> statement-breakpoint
CREATE TABLE `index_log` (
	`seq` int NOT NULL,
	`change_kind` varchar(8) character set ascii collate ascii_bin NOT NULL,
	`subject_kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`subject_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `index_log_seq` PRIMARY KEY(`seq`)
);
--> statement-breakpoint
CREATE TABLE `passages` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`hit_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`number` int NOT NULL,
	`start_s` double NOT NULL,
	`end_s` double NOT NULL,
	`ref_start_s` double NOT NULL,
	`ref_end_s` double NOT NULL,
	`speed` double NOT NULL,
	`pitch_semitones` double NOT NULL,
	`landmarks_matched` int NOT NULL,
	`landmarks_total` int NOT NULL,
	`evidence` double NOT NULL,
	CONSTRAINT `passages_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `recording_fingerprints` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`subject_kind` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`subject_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`channel` varchar(5) character set ascii collate ascii_bin NOT NULL,
	`engine_version` int NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin,
	`packed` mediumblob NOT NULL,
	`sha256` varchar(64) character set ascii collate ascii_bin NOT NULL,
	`duration_s` double NOT NULL,
	`content_s` double NOT NULL,
	`comparable` boolean NOT NULL,
	`not_comparable` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `recording_fingerprints_id` PRIMARY KEY(`id`),
	CONSTRAINT `recording_fingerprints_once` UNIQUE(`subject_kind`,`subject_id`,`channel`,`engine_version`)
);
--> statement-breakpoint
CREATE TABLE `register_entries` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`kind` varchar(16) character set ascii collate ascii_bin NOT NULL,
	`code` varchar(10) character set ascii collate ascii_bin,
	`title` varchar(200) NOT NULL,
	`family_ids` json NOT NULL,
	`person_id` varchar(40) character set ascii collate ascii_bin,
	`library_id` varchar(40) character set ascii collate ascii_bin,
	`words` varchar(500) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `register_entries_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `screening_requests` (
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`family_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`library_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`deliverer_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`writer_ids` json NOT NULL,
	`declared_loops` json NOT NULL,
	`expects_family_match` boolean NOT NULL,
	`requested_at` datetime(3) NOT NULL,
	CONSTRAINT `screening_requests_recording_id` PRIMARY KEY(`recording_id`)
);
--> statement-breakpoint
CREATE TABLE `screening_runs` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`recording_id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`engine_version` int NOT NULL,
	`seq_searched` int NOT NULL,
	`seq_admitted` int NOT NULL,
	`recordings_compared` int NOT NULL,
	`hours_compared` double NOT NULL,
	`thresholds` json NOT NULL,
	`outcome` varchar(16) character set ascii collate ascii_bin NOT NULL,
	`outcome_words` varchar(500) NOT NULL,
	`started_at` datetime(3) NOT NULL,
	`finished_at` datetime(3) NOT NULL,
	`superseded_by` varchar(40) character set ascii collate ascii_bin,
	CONSTRAINT `screening_runs_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `shared_loops` (
	`id` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`code` varchar(10) character set ascii collate ascii_bin NOT NULL,
	`title` varchar(200) NOT NULL,
	`length_s` double NOT NULL,
	`bpm` double,
	`condition_kind` varchar(30) character set ascii collate ascii_bin NOT NULL,
	`condition_words` varchar(300) NOT NULL,
	`coverage_max_bps` int NOT NULL,
	`file_key` varchar(120) character set ascii collate ascii_bin,
	`registered_by` varchar(40) character set ascii collate ascii_bin NOT NULL,
	`confirmed_by` varchar(40) character set ascii collate ascii_bin,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `shared_loops_id` PRIMARY KEY(`id`),
	CONSTRAINT `shared_loops_code` UNIQUE(`code`)
);
--> statement-breakpoint
ALTER TABLE `ledger_transfers` ADD CONSTRAINT `ledger_transfers_entry_currency` FOREIGN KEY (`entry_id`,`currency`) REFERENCES `ledger_entries`(`id`,`currency`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `ledger_transfers` ADD CONSTRAINT `ledger_transfers_debit_currency` FOREIGN KEY (`debit_account_id`,`currency`) REFERENCES `ledger_accounts`(`id`,`currency`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `ledger_transfers` ADD CONSTRAINT `ledger_transfers_credit_currency` FOREIGN KEY (`credit_account_id`,`currency`) REFERENCES `ledger_accounts`(`id`,`currency`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `memberships_person` ON `memberships` (`person_id`);--> statement-breakpoint
CREATE INDEX `memberships_library` ON `memberships` (`library_id`,`role`);--> statement-breakpoint
CREATE INDEX `catalogue_events_family` ON `catalogue_events` (`family_id`,`happened_at`);--> statement-breakpoint
CREATE INDEX `families_library` ON `families` (`library_id`,`state`);--> statement-breakpoint
CREATE INDEX `family_terms_term` ON `family_terms` (`kind`,`term`);--> statement-breakpoint
CREATE INDEX `holds_family` ON `holds` (`family_id`,`ended_at`);--> statement-breakpoint
CREATE INDEX `recordings_family` ON `recordings` (`family_id`,`position`);--> statement-breakpoint
CREATE INDEX `recordings_sha` ON `recordings` (`file_sha256`);--> statement-breakpoint
CREATE INDEX `split_shares_version` ON `split_shares` (`split_version_id`);--> statement-breakpoint
CREATE INDEX `split_shares_person` ON `split_shares` (`person_id`);--> statement-breakpoint
CREATE INDEX `deliveries_deliverer` ON `deliveries` (`deliverer_id`,`state`);--> statement-breakpoint
CREATE INDEX `deliveries_library` ON `deliveries` (`library_id`,`state`);--> statement-breakpoint
CREATE INDEX `delivery_events_delivery` ON `delivery_events` (`delivery_id`,`happened_at`);--> statement-breakpoint
CREATE INDEX `delivery_versions_delivery` ON `delivery_versions` (`delivery_id`,`position`);--> statement-breakpoint
CREATE INDEX `delivery_versions_recording` ON `delivery_versions` (`recording_id`);--> statement-breakpoint
CREATE INDEX `delivery_writers_delivery` ON `delivery_writers` (`delivery_id`);--> statement-breakpoint
CREATE INDEX `delivery_writers_person` ON `delivery_writers` (`person_id`,`state`);--> statement-breakpoint
CREATE INDEX `jobs_ready` ON `jobs` (`state`,`priority`,`run_at`);--> statement-breakpoint
CREATE INDEX `jobs_name` ON `jobs` (`name`,`state`);--> statement-breakpoint
CREATE INDEX `mail_outbox_subject` ON `mail_outbox` (`subject_id`);--> statement-breakpoint
CREATE INDEX `stored_files_owner` ON `stored_files` (`owner_kind`,`owner_id`);--> statement-breakpoint
CREATE INDEX `audit_log_subject` ON `audit_log` (`subject`);--> statement-breakpoint
CREATE INDEX `audit_log_library` ON `audit_log` (`library_id`,`system_at`);--> statement-breakpoint
CREATE INDEX `audit_log_verb` ON `audit_log` (`verb`,`system_at`);--> statement-breakpoint
CREATE INDEX `advances_person` ON `advances` (`person_id`,`library_id`);--> statement-breakpoint
CREATE INDEX `ledger_entries_posted` ON `ledger_entries` (`posted_at`);--> statement-breakpoint
CREATE INDEX `ledger_entries_library` ON `ledger_entries` (`library_id`,`posted_at`);--> statement-breakpoint
CREATE INDEX `ledger_entries_order` ON `ledger_entries` (`order_id`);--> statement-breakpoint
CREATE INDEX `ledger_entries_code` ON `ledger_entries` (`code`,`event_at`);--> statement-breakpoint
CREATE INDEX `ledger_entries_source` ON `ledger_entries` (`processor_source`);--> statement-breakpoint
CREATE INDEX `ledger_transfers_entry` ON `ledger_transfers` (`entry_id`,`number`);--> statement-breakpoint
CREATE INDEX `ledger_transfers_debit` ON `ledger_transfers` (`debit_account_id`);--> statement-breakpoint
CREATE INDEX `ledger_transfers_credit` ON `ledger_transfers` (`credit_account_id`);--> statement-breakpoint
CREATE INDEX `ledger_transfers_line` ON `ledger_transfers` (`order_line_id`);--> statement-breakpoint
CREATE INDEX `payment_events_type` ON `payment_events` (`type`);--> statement-breakpoint
CREATE INDEX `payouts_run` ON `payouts` (`run_id`);--> statement-breakpoint
CREATE INDEX `payouts_holder` ON `payouts` (`holder_id`);--> statement-breakpoint
CREATE INDEX `invoices_order` ON `invoices` (`order_id`);--> statement-breakpoint
CREATE INDEX `licence_records_company` ON `licence_records` (`company_id`);--> statement-breakpoint
CREATE INDEX `licence_records_family` ON `licence_records` (`family_id`);--> statement-breakpoint
CREATE INDEX `licence_records_library` ON `licence_records` (`library_id`,`issued_at`);--> statement-breakpoint
CREATE INDEX `master_downloads_licence` ON `master_downloads` (`licence_number`);--> statement-breakpoint
CREATE INDEX `order_lines_family` ON `order_lines` (`family_id`);--> statement-breakpoint
CREATE INDEX `order_refunds_order` ON `order_refunds` (`order_id`);--> statement-breakpoint
CREATE INDEX `orders_company` ON `orders` (`company_id`);--> statement-breakpoint
CREATE INDEX `orders_library` ON `orders` (`library_id`,`placed_at`);--> statement-breakpoint
CREATE INDEX `orders_session` ON `orders` (`checkout_session`);--> statement-breakpoint
CREATE INDEX `orders_intent` ON `orders` (`payment_intent`);--> statement-breakpoint
CREATE INDEX `record_log_licence` ON `record_log` (`licence_number`);--> statement-breakpoint
CREATE INDEX `productions_company` ON `productions` (`company_id`);--> statement-breakpoint
CREATE INDEX `notice_events_notice` ON `notice_events` (`notice_id`,`at`);--> statement-breakpoint
CREATE INDEX `notices_state` ON `notices` (`state`,`received_at`);--> statement-breakpoint
CREATE INDEX `notices_email` ON `notices` (`email_hash`,`received_at`);--> statement-breakpoint
CREATE INDEX `reported_works_level` ON `reported_works` (`level`);--> statement-breakpoint
CREATE INDEX `aligned_listenings_hit` ON `aligned_listenings` (`hit_id`);--> statement-breakpoint
CREATE INDEX `case_messages_case` ON `case_messages` (`case_id`,`at`);--> statement-breakpoint
CREATE INDEX `cases_queue` ON `cases` (`library_id`,`state`,`due_at`);--> statement-breakpoint
CREATE INDEX `cases_delivery` ON `cases` (`delivery_id`);--> statement-breakpoint
CREATE INDEX `disclosures_case` ON `disclosures` (`case_id`);--> statement-breakpoint
CREATE INDEX `disclosures_library` ON `disclosures` (`library_id`,`at`);--> statement-breakpoint
CREATE INDEX `findings_case` ON `findings` (`case_id`);--> statement-breakpoint
CREATE INDEX `upheld_findings_person` ON `upheld_findings` (`person_id`);--> statement-breakpoint
CREATE INDEX `certificates_recording` ON `certificates` (`recording_id`);--> statement-breakpoint
CREATE INDEX `hits_run` ON `hits` (`run_id`);--> statement-breakpoint
CREATE INDEX `hits_reference` ON `hits` (`reference_kind`,`reference_id`);--> statement-breakpoint
CREATE INDEX `hits_recording` ON `hits` (`recording_id`);--> statement-breakpoint
CREATE INDEX `index_log_subject` ON `index_log` (`subject_kind`,`subject_id`);--> statement-breakpoint
CREATE INDEX `passages_hit` ON `passages` (`hit_id`,`number`);--> statement-breakpoint
CREATE INDEX `register_entries_kind` ON `register_entries` (`kind`);--> statement-breakpoint
CREATE INDEX `screening_runs_recording` ON `screening_runs` (`recording_id`);