CREATE TABLE `calendar_days` (
	`calendar_id` bigint unsigned NOT NULL,
	`date` date NOT NULL,
	`name` varchar(120) NOT NULL,
	CONSTRAINT `calendar_days_calendar_id_date_pk` PRIMARY KEY(`calendar_id`,`date`)
);
--> statement-breakpoint
CREATE TABLE `calendars` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`name` varchar(120) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `calendars_id` PRIMARY KEY(`id`),
	CONSTRAINT `calendars_name_unique` UNIQUE(`name`)
);
--> statement-breakpoint
CREATE TABLE `exclusions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned NOT NULL,
	`kind` varchar(20) NOT NULL,
	`from_at` datetime(3) NOT NULL,
	`to_at` datetime(3),
	`reason` varchar(300) NOT NULL,
	`created_by` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`ended_by` bigint unsigned,
	CONSTRAINT `exclusions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `planned_changes` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`name` varchar(120) NOT NULL,
	`ward_id` bigint unsigned,
	`room_id` bigint unsigned,
	`item_ids` json NOT NULL,
	`kind` varchar(10) NOT NULL,
	`factor` double,
	`units_per_case` double,
	`cases_per_day` double,
	`weekdays` varchar(7) NOT NULL,
	`starts_on` date NOT NULL,
	`ends_on` date,
	`reason` varchar(300) NOT NULL,
	`created_by` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`ended_by` bigint unsigned,
	`seen_factor` double,
	`seen_intervals` int NOT NULL DEFAULT 0,
	`used_factor` double,
	CONSTRAINT `planned_changes_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `pool_exclusions` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`ward_id` bigint unsigned NOT NULL,
	`reason` varchar(300) NOT NULL,
	`created_by` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	`ended_by` bigint unsigned,
	CONSTRAINT `pool_exclusions_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `pools` (
	`item_id` bigint unsigned NOT NULL,
	`ward_kind` varchar(20) NOT NULL,
	`nu0` double NOT NULL,
	`w0` double NOT NULL,
	`rate_a` double,
	`rate_b` double,
	`basis` varchar(10) NOT NULL,
	`members` json NOT NULL,
	`made_at` datetime(3) NOT NULL,
	CONSTRAINT `pools_item_id_ward_kind_pk` PRIMARY KEY(`item_id`,`ward_kind`)
);
--> statement-breakpoint
CREATE TABLE `weekday_profiles` (
	`ward_id` bigint unsigned NOT NULL,
	`weights` json NOT NULL,
	`intervals` int NOT NULL,
	`made_at` datetime(3) NOT NULL,
	CONSTRAINT `weekday_profiles_ward_id` PRIMARY KEY(`ward_id`)
);
--> statement-breakpoint
ALTER TABLE `hospitals` ADD `calendar_id` bigint unsigned;--> statement-breakpoint
ALTER TABLE `hospitals` ADD `is_pooling` boolean DEFAULT true NOT NULL;--> statement-breakpoint
ALTER TABLE `rooms` ADD `count_days` varchar(7) DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE `suppliers` ADD `calendar_id` bigint unsigned;--> statement-breakpoint
ALTER TABLE `wards` ADD `calendar_id` bigint unsigned;--> statement-breakpoint
ALTER TABLE `lead_time_observations` ADD `delay_days` double DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE `policies` ADD `facts` json;--> statement-breakpoint
ALTER TABLE `policies` ADD `basis_id` bigint unsigned;--> statement-breakpoint
ALTER TABLE `calendar_days` ADD CONSTRAINT `calendar_days_calendar_id_calendars_id_fk` FOREIGN KEY (`calendar_id`) REFERENCES `calendars`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `exclusions_bin` ON `exclusions` (`bin_id`,`ended_at`);--> statement-breakpoint
CREATE INDEX `planned_changes_time` ON `planned_changes` (`ended_at`,`starts_on`);--> statement-breakpoint
CREATE INDEX `pool_exclusions_item` ON `pool_exclusions` (`item_id`,`ended_at`);