CREATE TABLE `instrument_ranges` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`instrument_id` int unsigned NOT NULL,
	`unit` varchar(20) NOT NULL,
	`lower` double NOT NULL,
	`upper` double NOT NULL,
	`percent` double NOT NULL,
	`digits` double NOT NULL,
	`resolution` double NOT NULL,
	CONSTRAINT `instrument_ranges_id` PRIMARY KEY(`id`),
	CONSTRAINT `instrument_ranges_order` CHECK(upper > lower and percent >= 0 and digits >= 0 and resolution > 0)
);
--> statement-breakpoint
CREATE TABLE `instruments` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned NOT NULL,
	`name` varchar(120) NOT NULL,
	`kind` varchar(60) NOT NULL,
	`serial` varchar(80) NOT NULL,
	`calibrated_on` date NOT NULL,
	`calibration_due` date NOT NULL,
	`certificate` varchar(120) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `instruments_id` PRIMARY KEY(`id`),
	CONSTRAINT `instruments_serial` UNIQUE(`workshop_id`,`serial`),
	CONSTRAINT `instruments_calibration` CHECK(calibration_due >= calibrated_on)
);
--> statement-breakpoint
CREATE TABLE `observations` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`check_key` varchar(190) character set utf8mb4 collate utf8mb4_bin NOT NULL,
	`kind` enum('measured','examined','not-applicable','not-possible','carried-over') NOT NULL,
	`value` double,
	`bound` enum('over','under'),
	`unit` varchar(20),
	`instrument_id` int unsigned,
	`accuracy` json,
	`calibration_due` date,
	`conditions` varchar(500) NOT NULL DEFAULT '',
	`conforms` enum('yes','no'),
	`reason` varchar(1000),
	`corrects_id` int unsigned,
	`carried_from_id` int unsigned,
	`by_id` int unsigned NOT NULL,
	`at` datetime(3) NOT NULL,
	`note` text,
	CONSTRAINT `observations_id` PRIMARY KEY(`id`),
	CONSTRAINT `observations_corrected_once` UNIQUE(`corrects_id`),
	CONSTRAINT `observations_shape` CHECK((kind <> 'measured' or (value is not null and unit is not null and instrument_id is not null
          and calibration_due is not null))
        and (kind <> 'examined' or conforms is not null)
        and (kind not in ('not-applicable', 'not-possible') or reason is not null)
        and (kind <> 'carried-over' or carried_from_id is not null)
        and (corrects_id is null or reason is not null))
);
--> statement-breakpoint
CREATE TABLE `decisions` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`kind` enum('signed','refused') NOT NULL,
	`signer_id` int unsigned NOT NULL,
	`licence_id` int unsigned NOT NULL,
	`statement` text NOT NULL,
	`departures` text,
	`conditions` json,
	`recheck_on` date,
	`signature_method` enum('drawn','typed') NOT NULL,
	`signature_image` mediumblob,
	`typed_name` varchar(120),
	`decided_at` datetime(3) NOT NULL,
	CONSTRAINT `decisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `decisions_revision` UNIQUE(`revision_id`),
	CONSTRAINT `decisions_shape` CHECK((kind <> 'signed' or (conditions is not null and recheck_on is not null))
        and ((signature_method = 'drawn') = (signature_image is not null))
        and ((signature_method = 'typed') = (typed_name is not null)))
);
--> statement-breakpoint
CREATE TABLE `records` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`decision_id` int unsigned NOT NULL,
	`public_code` varchar(32) NOT NULL,
	`canonical_json` mediumtext NOT NULL,
	`sha256` char(64) NOT NULL,
	`made_at` datetime(3) NOT NULL,
	`pdf_key` varchar(190),
	`pdf_sha256` char(64),
	`pdf_bytes` int unsigned,
	`pdf_made_at` datetime(3),
	CONSTRAINT `records_id` PRIMARY KEY(`id`),
	CONSTRAINT `records_decision` UNIQUE(`decision_id`),
	CONSTRAINT `records_publicCode_unique` UNIQUE(`public_code`)
);
--> statement-breakpoint
CREATE TABLE `withdrawals` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`record_id` int unsigned NOT NULL,
	`by_id` int unsigned NOT NULL,
	`reason` text NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `withdrawals_id` PRIMARY KEY(`id`),
	CONSTRAINT `withdrawals_record` UNIQUE(`record_id`)
);
--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`kind` enum('make-record-pdf') NOT NULL,
	`subject_id` int unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`due_at` datetime(3) NOT NULL,
	`attempts` int unsigned NOT NULL DEFAULT 0,
	`locked_until` datetime(3),
	`done_at` datetime(3),
	`last_error` varchar(500),
	CONSTRAINT `jobs_id` PRIMARY KEY(`id`),
	CONSTRAINT `jobs_once` UNIQUE(`kind`,`subject_id`)
);
--> statement-breakpoint
CREATE TABLE `outbox` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned,
	`recipient` varchar(254) NOT NULL,
	`subject` varchar(200) NOT NULL,
	`text` text NOT NULL,
	`html` text NOT NULL,
	`message_key` varchar(60) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`due_at` datetime(3) NOT NULL,
	`attempts` int unsigned NOT NULL DEFAULT 0,
	`locked_until` datetime(3),
	`sent_at` datetime(3),
	`last_error` varchar(500),
	CONSTRAINT `outbox_id` PRIMARY KEY(`id`),
	CONSTRAINT `outbox_messageKey_unique` UNIQUE(`message_key`)
);
--> statement-breakpoint
CREATE TABLE `failed_tries` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`key` varchar(320) NOT NULL,
	`at` datetime(3) NOT NULL,
	CONSTRAINT `failed_tries_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `licences` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned NOT NULL,
	`person_id` int unsigned NOT NULL,
	`holder_name` varchar(120) NOT NULL,
	`number` varchar(60) NOT NULL,
	`authority` varchar(120) NOT NULL,
	`valid_from` date NOT NULL,
	`valid_to` date NOT NULL,
	`max_supply_volts` int unsigned NOT NULL,
	`covers_batteries` boolean NOT NULL,
	`revoked_at` datetime(3),
	CONSTRAINT `licences_id` PRIMARY KEY(`id`),
	CONSTRAINT `licences_number` UNIQUE(`workshop_id`,`authority`,`number`)
);
--> statement-breakpoint
CREATE TABLE `memberships` (
	`workshop_id` int unsigned NOT NULL,
	`person_id` int unsigned NOT NULL,
	`role` enum('builder','inspector','electrician','archivist','steward') NOT NULL,
	`granted_at` datetime(3) NOT NULL,
	CONSTRAINT `memberships_workshop_id_person_id_role_pk` PRIMARY KEY(`workshop_id`,`person_id`,`role`)
);
--> statement-breakpoint
CREATE TABLE `people` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`email` varchar(254) NOT NULL,
	`name` varchar(120) NOT NULL,
	`password_hash` varchar(255),
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `people_id` PRIMARY KEY(`id`),
	CONSTRAINT `people_email_unique` UNIQUE(`email`)
);
--> statement-breakpoint
CREATE TABLE `sessions` (
	`id_hash` char(64) NOT NULL,
	`person_id` int unsigned NOT NULL,
	`user_agent` varchar(255) NOT NULL,
	`ip` varchar(45) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`last_seen_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	CONSTRAINT `sessions_id_hash` PRIMARY KEY(`id_hash`)
);
--> statement-breakpoint
CREATE TABLE `tokens` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`hash` char(64) NOT NULL,
	`purpose` enum('reset','invitation') NOT NULL,
	`person_id` int unsigned NOT NULL,
	`workshop_id` int unsigned,
	`roles` json,
	`created_by_id` int unsigned,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`used_at` datetime(3),
	CONSTRAINT `tokens_id` PRIMARY KEY(`id`),
	CONSTRAINT `tokens_hash_unique` UNIQUE(`hash`)
);
--> statement-breakpoint
CREATE TABLE `workshops` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`slug` varchar(60) NOT NULL,
	`name` varchar(120) NOT NULL,
	`time_zone` varchar(60) NOT NULL,
	`is_demo` boolean NOT NULL,
	`rule_set_key` varchar(60) NOT NULL,
	`rule_set_version` varchar(20) NOT NULL,
	`accuracy_policy` enum('rect','maker-k2') NOT NULL,
	`recheck_months` int unsigned NOT NULL,
	`next_unit_number` int unsigned NOT NULL DEFAULT 1,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `workshops_id` PRIMARY KEY(`id`),
	CONSTRAINT `workshops_slug_unique` UNIQUE(`slug`)
);
--> statement-breakpoint
CREATE TABLE `audit_entries` (
	`workshop_id` int unsigned NOT NULL,
	`sequence` int unsigned NOT NULL,
	`at` datetime(3) NOT NULL,
	`actor_id` int unsigned,
	`act` varchar(60) NOT NULL,
	`unit_id` int unsigned,
	`from_state` enum('draft','submitted','on_bench','awaiting_signature','sent_back','signed','refused','withdrawn','superseded'),
	`to_state` enum('draft','submitted','on_bench','awaiting_signature','sent_back','signed','refused','withdrawn','superseded'),
	`detail` json NOT NULL,
	`previous_hash` char(64) NOT NULL,
	`hash` char(64) NOT NULL,
	CONSTRAINT `audit_entries_workshop_id_sequence_pk` PRIMARY KEY(`workshop_id`,`sequence`)
);
--> statement-breakpoint
CREATE TABLE `trail_heads` (
	`workshop_id` int unsigned NOT NULL,
	`sequence` int unsigned NOT NULL,
	`hash` char(64) NOT NULL,
	CONSTRAINT `trail_heads_workshop_id` PRIMARY KEY(`workshop_id`)
);
--> statement-breakpoint
CREATE TABLE `bench_turns` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`inspector_id` int unsigned NOT NULL,
	`taken_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`reclaimed_by_id` int unsigned,
	`reclaim_reason` varchar(1000),
	CONSTRAINT `bench_turns_id` PRIMARY KEY(`id`),
	CONSTRAINT `bench_turns_reclaim` CHECK((reclaimed_by_id is null) = (reclaim_reason is null))
);
--> statement-breakpoint
CREATE TABLE `files` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`kind` enum('photo','drawing') NOT NULL,
	`subject` enum('unit','check','finding','answer') NOT NULL,
	`check_key` varchar(190) character set utf8mb4 collate utf8mb4_bin,
	`finding_id` int unsigned,
	`content_type` varchar(60) NOT NULL,
	`bytes` int unsigned NOT NULL,
	`width` int unsigned,
	`height` int unsigned,
	`sha256` varchar(64) NOT NULL,
	`storage_key` varchar(190) NOT NULL,
	`thumb_key` varchar(190),
	`original_name` varchar(200) NOT NULL,
	`caption` varchar(300) NOT NULL DEFAULT '',
	`added_by_id` int unsigned NOT NULL,
	`added_at` datetime(3) NOT NULL,
	`removed_at` datetime(3),
	CONSTRAINT `files_id` PRIMARY KEY(`id`),
	CONSTRAINT `files_storageKey_unique` UNIQUE(`storage_key`)
);
--> statement-breakpoint
CREATE TABLE `finding_answers` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`finding_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`text` text NOT NULL,
	`answered_by_id` int unsigned NOT NULL,
	`answered_at` datetime(3) NOT NULL,
	CONSTRAINT `finding_answers_id` PRIMARY KEY(`id`),
	CONSTRAINT `finding_answers_round` UNIQUE(`finding_id`,`revision_id`)
);
--> statement-breakpoint
CREATE TABLE `findings` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`revision_id` int unsigned NOT NULL,
	`number` int unsigned NOT NULL,
	`severity` enum('danger','defect','advice') NOT NULL,
	`check_key` varchar(190) character set utf8mb4 collate utf8mb4_bin,
	`element_id` varchar(40),
	`text` text NOT NULL,
	`raised_by_id` int unsigned NOT NULL,
	`raised_at` datetime(3) NOT NULL,
	`closed_by_id` int unsigned,
	`closed_at` datetime(3),
	`closing_text` text,
	CONSTRAINT `findings_id` PRIMARY KEY(`id`),
	CONSTRAINT `findings_number` UNIQUE(`unit_id`,`number`),
	CONSTRAINT `findings_closing` CHECK((closed_at is null) = (closed_by_id is null))
);
--> statement-breakpoint
CREATE TABLE `former_builders` (
	`unit_id` int unsigned NOT NULL,
	`person_id` int unsigned NOT NULL,
	`handed_on_by_id` int unsigned NOT NULL,
	`handed_on_at` datetime(3) NOT NULL,
	CONSTRAINT `former_builders_unit_id_person_id_pk` PRIMARY KEY(`unit_id`,`person_id`)
);
--> statement-breakpoint
CREATE TABLE `revisions` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`unit_id` int unsigned NOT NULL,
	`number` int unsigned NOT NULL,
	`map` json NOT NULL,
	`map_edition` int unsigned NOT NULL DEFAULT 1,
	`facts` json,
	`rule_set_key` varchar(60) NOT NULL,
	`rule_set_version` varchar(20) NOT NULL,
	`accuracy_policy` enum('rect','maker-k2'),
	`created_at` datetime(3) NOT NULL,
	`submitted_at` datetime(3),
	`sent_back_reason` text,
	`sent_back_by_id` int unsigned,
	CONSTRAINT `revisions_id` PRIMARY KEY(`id`),
	CONSTRAINT `revisions_number` UNIQUE(`unit_id`,`number`)
);
--> statement-breakpoint
CREATE TABLE `units` (
	`id` int unsigned AUTO_INCREMENT NOT NULL,
	`workshop_id` int unsigned NOT NULL,
	`number` int unsigned NOT NULL,
	`name` varchar(120) NOT NULL,
	`purpose` varchar(1000) NOT NULL,
	`place_of_use` varchar(300) NOT NULL,
	`supply_volts` double NOT NULL,
	`supply_hertz` double NOT NULL,
	`protection_class` enum('I','II') NOT NULL,
	`cord_length_m` double,
	`cord_area_mm2` double,
	`handheld` boolean,
	`altitude_m` double,
	`builder_id` int unsigned NOT NULL,
	`predecessor_id` int unsigned,
	`state` enum('draft','submitted','on_bench','awaiting_signature','sent_back','signed','refused','withdrawn','superseded') NOT NULL,
	`revision` int unsigned NOT NULL,
	`inspector_id` int unsigned,
	`version` int unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`changed_at` datetime(3) NOT NULL,
	`discarded_at` datetime(3),
	CONSTRAINT `units_id` PRIMARY KEY(`id`),
	CONSTRAINT `units_number` UNIQUE(`workshop_id`,`number`),
	CONSTRAINT `units_supply` CHECK(supply_volts > 0 and supply_hertz >= 0)
);
--> statement-breakpoint
ALTER TABLE `instrument_ranges` ADD CONSTRAINT `instrument_ranges_instrument_id_instruments_id_fk` FOREIGN KEY (`instrument_id`) REFERENCES `instruments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `instruments` ADD CONSTRAINT `instruments_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_instrument_id_instruments_id_fk` FOREIGN KEY (`instrument_id`) REFERENCES `instruments`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_by_id_people_id_fk` FOREIGN KEY (`by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_corrects` FOREIGN KEY (`corrects_id`) REFERENCES `observations`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `observations` ADD CONSTRAINT `observations_carried_from` FOREIGN KEY (`carried_from_id`) REFERENCES `observations`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `decisions` ADD CONSTRAINT `decisions_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `decisions` ADD CONSTRAINT `decisions_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `decisions` ADD CONSTRAINT `decisions_signer_id_people_id_fk` FOREIGN KEY (`signer_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `decisions` ADD CONSTRAINT `decisions_licence_id_licences_id_fk` FOREIGN KEY (`licence_id`) REFERENCES `licences`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `records` ADD CONSTRAINT `records_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `records` ADD CONSTRAINT `records_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `records` ADD CONSTRAINT `records_decision_id_decisions_id_fk` FOREIGN KEY (`decision_id`) REFERENCES `decisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `withdrawals` ADD CONSTRAINT `withdrawals_record_id_records_id_fk` FOREIGN KEY (`record_id`) REFERENCES `records`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `withdrawals` ADD CONSTRAINT `withdrawals_by_id_people_id_fk` FOREIGN KEY (`by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `outbox` ADD CONSTRAINT `outbox_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `licences` ADD CONSTRAINT `licences_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `licences` ADD CONSTRAINT `licences_person_id_people_id_fk` FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `memberships` ADD CONSTRAINT `memberships_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `memberships` ADD CONSTRAINT `memberships_person_id_people_id_fk` FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `sessions` ADD CONSTRAINT `sessions_person_id_people_id_fk` FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `tokens` ADD CONSTRAINT `tokens_person_id_people_id_fk` FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `tokens` ADD CONSTRAINT `tokens_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `tokens` ADD CONSTRAINT `tokens_created_by_id_people_id_fk` FOREIGN KEY (`created_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `audit_entries` ADD CONSTRAINT `audit_entries_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `audit_entries` ADD CONSTRAINT `audit_entries_actor_id_people_id_fk` FOREIGN KEY (`actor_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `audit_entries` ADD CONSTRAINT `audit_entries_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `trail_heads` ADD CONSTRAINT `trail_heads_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bench_turns` ADD CONSTRAINT `bench_turns_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bench_turns` ADD CONSTRAINT `bench_turns_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bench_turns` ADD CONSTRAINT `bench_turns_inspector_id_people_id_fk` FOREIGN KEY (`inspector_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bench_turns` ADD CONSTRAINT `bench_turns_reclaimed_by_id_people_id_fk` FOREIGN KEY (`reclaimed_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_finding_id_findings_id_fk` FOREIGN KEY (`finding_id`) REFERENCES `findings`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `files` ADD CONSTRAINT `files_added_by_id_people_id_fk` FOREIGN KEY (`added_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `finding_answers` ADD CONSTRAINT `finding_answers_finding_id_findings_id_fk` FOREIGN KEY (`finding_id`) REFERENCES `findings`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `finding_answers` ADD CONSTRAINT `finding_answers_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `finding_answers` ADD CONSTRAINT `finding_answers_answered_by_id_people_id_fk` FOREIGN KEY (`answered_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `findings` ADD CONSTRAINT `findings_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `findings` ADD CONSTRAINT `findings_revision_id_revisions_id_fk` FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `findings` ADD CONSTRAINT `findings_raised_by_id_people_id_fk` FOREIGN KEY (`raised_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `findings` ADD CONSTRAINT `findings_closed_by_id_people_id_fk` FOREIGN KEY (`closed_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `former_builders` ADD CONSTRAINT `former_builders_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `former_builders` ADD CONSTRAINT `former_builders_person_id_people_id_fk` FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `former_builders` ADD CONSTRAINT `former_builders_handed_on_by_id_people_id_fk` FOREIGN KEY (`handed_on_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `revisions` ADD CONSTRAINT `revisions_unit_id_units_id_fk` FOREIGN KEY (`unit_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `revisions` ADD CONSTRAINT `revisions_sent_back_by_id_people_id_fk` FOREIGN KEY (`sent_back_by_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_workshop_id_workshops_id_fk` FOREIGN KEY (`workshop_id`) REFERENCES `workshops`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_builder_id_people_id_fk` FOREIGN KEY (`builder_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_inspector_id_people_id_fk` FOREIGN KEY (`inspector_id`) REFERENCES `people`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `units` ADD CONSTRAINT `units_predecessor` FOREIGN KEY (`predecessor_id`) REFERENCES `units`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `instrument_ranges_by_instrument` ON `instrument_ranges` (`instrument_id`);--> statement-breakpoint
CREATE INDEX `observations_by_check` ON `observations` (`revision_id`,`check_key`,`id`);--> statement-breakpoint
CREATE INDEX `observations_by_unit` ON `observations` (`unit_id`);--> statement-breakpoint
CREATE INDEX `observations_by_instrument` ON `observations` (`instrument_id`);--> statement-breakpoint
CREATE INDEX `decisions_by_unit` ON `decisions` (`unit_id`);--> statement-breakpoint
CREATE INDEX `records_by_workshop` ON `records` (`workshop_id`,`made_at`);--> statement-breakpoint
CREATE INDEX `records_by_unit` ON `records` (`unit_id`);--> statement-breakpoint
CREATE INDEX `jobs_due` ON `jobs` (`done_at`,`due_at`);--> statement-breakpoint
CREATE INDEX `outbox_due` ON `outbox` (`sent_at`,`due_at`);--> statement-breakpoint
CREATE INDEX `failed_tries_by_key` ON `failed_tries` (`key`,`at`);--> statement-breakpoint
CREATE INDEX `failed_tries_by_moment` ON `failed_tries` (`at`);--> statement-breakpoint
CREATE INDEX `licences_by_person` ON `licences` (`workshop_id`,`person_id`);--> statement-breakpoint
CREATE INDEX `memberships_by_person` ON `memberships` (`person_id`);--> statement-breakpoint
CREATE INDEX `sessions_by_person` ON `sessions` (`person_id`);--> statement-breakpoint
CREATE INDEX `sessions_by_expiry` ON `sessions` (`expires_at`);--> statement-breakpoint
CREATE INDEX `tokens_by_person` ON `tokens` (`person_id`);--> statement-breakpoint
CREATE INDEX `tokens_by_workshop` ON `tokens` (`workshop_id`);--> statement-breakpoint
CREATE INDEX `audit_entries_by_unit` ON `audit_entries` (`unit_id`,`sequence`);--> statement-breakpoint
CREATE INDEX `bench_turns_by_unit` ON `bench_turns` (`unit_id`,`taken_at`);--> statement-breakpoint
CREATE INDEX `files_by_unit` ON `files` (`unit_id`,`subject`,`check_key`);--> statement-breakpoint
CREATE INDEX `units_by_state` ON `units` (`workshop_id`,`state`,`changed_at`);--> statement-breakpoint
CREATE INDEX `units_by_change` ON `units` (`workshop_id`,`changed_at`);--> statement-breakpoint
CREATE INDEX `units_by_builder` ON `units` (`workshop_id`,`builder_id`,`changed_at`);