CREATE TABLE `audit_log` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`at` datetime(3) NOT NULL,
	`user_id` bigint unsigned,
	`action` varchar(40) NOT NULL,
	`subject` varchar(30) NOT NULL,
	`subject_id` varchar(40) NOT NULL,
	`before` json,
	`after` json,
	`reason` varchar(500),
	CONSTRAINT `audit_log_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `bin_assignments` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`assigned_from` datetime(3) NOT NULL,
	`assigned_to` datetime(3),
	`entered_par` int,
	`entered_reorder_point` int,
	`capacity` int,
	CONSTRAINT `bin_assignments_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `bins` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(40) NOT NULL,
	`kind` varchar(12) NOT NULL,
	`overflow_of` bigint unsigned,
	`room_id` bigint unsigned NOT NULL,
	`bay` varchar(20) NOT NULL,
	`shelf` varchar(20) NOT NULL,
	`walk_order` int NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `bins_id` PRIMARY KEY(`id`),
	CONSTRAINT `bins_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `hospitals` (
	`id` tinyint NOT NULL,
	`name` varchar(120) NOT NULL,
	`time_zone` varchar(60) NOT NULL,
	`bin_word` varchar(20) NOT NULL,
	`currency` varchar(3) NOT NULL,
	`floor_level` double NOT NULL,
	`ceiling_level` double NOT NULL,
	`is_two_persons` boolean NOT NULL,
	`vital_policy_text` varchar(600) NOT NULL,
	`vital_policy_link` varchar(300) NOT NULL,
	`resupply_phone` varchar(60) NOT NULL,
	`ordering_cost` double NOT NULL,
	`holding_rate_per_year` double NOT NULL,
	`is_demo` boolean NOT NULL,
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `hospitals_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `item_barcodes` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`gtin` varchar(14) NOT NULL,
	`level` varchar(4) NOT NULL,
	CONSTRAINT `item_barcodes_id` PRIMARY KEY(`id`),
	CONSTRAINT `item_barcodes_gtin_item` UNIQUE(`gtin`,`item_id`)
);
--> statement-breakpoint
CREATE TABLE `item_packs` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`order_unit` varchar(30) NOT NULL,
	`units_per_order` int NOT NULL,
	`valid_from` datetime(3) NOT NULL,
	`valid_to` datetime(3),
	CONSTRAINT `item_packs_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `items` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(32) NOT NULL,
	`name` varchar(120) NOT NULL,
	`order_name` varchar(200) NOT NULL,
	`unit_of_use` varchar(30) NOT NULL,
	`unit_code` varchar(3) NOT NULL,
	`count_unit` varchar(30) NOT NULL,
	`count_note` varchar(200) NOT NULL,
	`ved` varchar(1) NOT NULL,
	`category` varchar(60) NOT NULL,
	`shelf_life_days` int,
	`min_shelf_days` int,
	`is_latex` boolean NOT NULL,
	`is_cold_chain` boolean NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `items_id` PRIMARY KEY(`id`),
	CONSTRAINT `items_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `lookalikes` (
	`item_id` bigint unsigned NOT NULL,
	`other_item_id` bigint unsigned NOT NULL,
	CONSTRAINT `lookalikes_item_id_other_item_id_pk` PRIMARY KEY(`item_id`,`other_item_id`)
);
--> statement-breakpoint
CREATE TABLE `rooms` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(32) NOT NULL,
	`name` varchar(120) NOT NULL,
	`ward_id` bigint unsigned NOT NULL,
	`count_every_days` double NOT NULL,
	`mode` varchar(20) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `rooms_id` PRIMARY KEY(`id`),
	CONSTRAINT `rooms_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `suppliers` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(32) NOT NULL,
	`name` varchar(120) NOT NULL,
	`email` varchar(200) NOT NULL,
	`kind` varchar(20) NOT NULL,
	`order_days` varchar(7) NOT NULL,
	`cut_off` varchar(5) NOT NULL,
	`arrival_days` varchar(7) NOT NULL,
	`arrival_time` varchar(5) NOT NULL,
	`lead_working_days` int NOT NULL,
	`minimum_order` double NOT NULL,
	`lead_time_days` double,
	`lead_time_sd` double,
	`retired_at` datetime(3),
	CONSTRAINT `suppliers_id` PRIMARY KEY(`id`),
	CONSTRAINT `suppliers_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `supply_agreements` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`supplier_id` bigint unsigned NOT NULL,
	`supplier_item` varchar(60) NOT NULL,
	`price` double,
	`currency` varchar(3) NOT NULL,
	`is_preferred` boolean NOT NULL,
	CONSTRAINT `supply_agreements_id` PRIMARY KEY(`id`),
	CONSTRAINT `supply_agreements_item_supplier` UNIQUE(`item_id`,`supplier_id`)
);
--> statement-breakpoint
CREATE TABLE `wards` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`code` varchar(32) NOT NULL,
	`name` varchar(120) NOT NULL,
	`kind` varchar(20) NOT NULL,
	`site` varchar(120) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `wards_id` PRIMARY KEY(`id`),
	CONSTRAINT `wards_code_unique` UNIQUE(`code`)
);
--> statement-breakpoint
CREATE TABLE `bin_levels` (
	`bin_id` bigint unsigned NOT NULL,
	`room_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned,
	`on_hand` int NOT NULL,
	`held` int NOT NULL,
	`last_count_quantity` int,
	`last_count_at` datetime(3),
	`last_count_op_id` varchar(36),
	`room_version` int NOT NULL,
	`folded_at` datetime(3),
	CONSTRAINT `bin_levels_bin_id` PRIMARY KEY(`bin_id`)
);
--> statement-breakpoint
CREATE TABLE `devices` (
	`device_id` varchar(64) NOT NULL,
	`first_seen_at` datetime(3) NOT NULL,
	`last_seen_at` datetime(3) NOT NULL,
	`app_version` varchar(40) NOT NULL,
	`is_retired` boolean NOT NULL DEFAULT false,
	CONSTRAINT `devices_device_id` PRIMARY KEY(`device_id`)
);
--> statement-breakpoint
CREATE TABLE `movements` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`op_id` varchar(36) NOT NULL,
	`part` int NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`room_id` bigint unsigned NOT NULL,
	`type` varchar(16) NOT NULL,
	`quantity` int NOT NULL,
	`effective_at` datetime(3) NOT NULL,
	`stated_at` datetime(3) NOT NULL,
	`recorded_at` datetime(3) NOT NULL,
	`user_id` bigint unsigned NOT NULL,
	`device_id` varchar(64) NOT NULL,
	`local_seq` bigint NOT NULL,
	`reason` varchar(200),
	`target_op_id` varchar(36),
	`order_line_id` bigint unsigned,
	`lot` varchar(40),
	`expiry` date,
	`flags` json NOT NULL,
	CONSTRAINT `movements_id` PRIMARY KEY(`id`),
	CONSTRAINT `movements_op_part` UNIQUE(`op_id`,`part`)
);
--> statement-breakpoint
CREATE TABLE `operations` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`op_id` varchar(36) NOT NULL,
	`payload_hash` varchar(64) NOT NULL,
	`type` varchar(20) NOT NULL,
	`version` int NOT NULL,
	`payload` json NOT NULL,
	`bin_id` bigint unsigned,
	`user_id` bigint unsigned NOT NULL,
	`device_id` varchar(64) NOT NULL,
	`local_seq` bigint NOT NULL,
	`app_version` varchar(40) NOT NULL,
	`received_at` datetime(3) NOT NULL,
	`effective_at` datetime(3) NOT NULL,
	`flags` json NOT NULL,
	CONSTRAINT `operations_id` PRIMARY KEY(`id`),
	CONSTRAINT `operations_op` UNIQUE(`op_id`)
);
--> statement-breakpoint
CREATE TABLE `quarantine` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`op_id` varchar(64) NOT NULL,
	`payload_hash` varchar(64) NOT NULL,
	`payload` json NOT NULL,
	`user_id` bigint unsigned NOT NULL,
	`device_id` varchar(64) NOT NULL,
	`code` varchar(40) NOT NULL,
	`message` varchar(300) NOT NULL,
	`received_at` datetime(3) NOT NULL,
	`closed_at` datetime(3),
	CONSTRAINT `quarantine_id` PRIMARY KEY(`id`),
	CONSTRAINT `quarantine_op` UNIQUE(`op_id`,`payload_hash`)
);
--> statement-breakpoint
CREATE TABLE `recount_tasks` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`op_id` varchar(36) NOT NULL,
	`cause` varchar(40) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`closed_at` datetime(3),
	CONSTRAINT `recount_tasks_id` PRIMARY KEY(`id`),
	CONSTRAINT `recount_tasks_op` UNIQUE(`op_id`)
);
--> statement-breakpoint
CREATE TABLE `room_tombstones` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`room_id` bigint unsigned NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`room_version` int NOT NULL,
	CONSTRAINT `room_tombstones_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `room_versions` (
	`room_id` bigint unsigned NOT NULL,
	`version` int NOT NULL,
	`reset_before` int NOT NULL,
	CONSTRAINT `room_versions_room_id` PRIMARY KEY(`room_id`)
);
--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`kind` varchar(30) NOT NULL,
	`dedupe_key` varchar(80),
	`payload` json NOT NULL,
	`run_at` datetime(3) NOT NULL,
	`attempts` int NOT NULL,
	`lease_owner` varchar(64),
	`lease_until` datetime(3),
	`last_error` varchar(300),
	`created_at` datetime(3) NOT NULL,
	CONSTRAINT `jobs_id` PRIMARY KEY(`id`),
	CONSTRAINT `jobs_dedupe` UNIQUE(`dedupe_key`)
);
--> statement-breakpoint
CREATE TABLE `mail_outbox` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`dedupe_key` varchar(120) NOT NULL,
	`recipient` varchar(200) NOT NULL,
	`reply_to` varchar(200),
	`subject` varchar(200) NOT NULL,
	`body` longtext NOT NULL,
	`state` varchar(10) NOT NULL,
	`attempts` int NOT NULL,
	`next_at` datetime(3) NOT NULL,
	`lease_owner` varchar(64),
	`lease_until` datetime(3),
	`last_error` varchar(300),
	`created_at` datetime(3) NOT NULL,
	`sent_at` datetime(3),
	CONSTRAINT `mail_outbox_id` PRIMARY KEY(`id`),
	CONSTRAINT `mail_outbox_dedupe` UNIQUE(`dedupe_key`)
);
--> statement-breakpoint
CREATE TABLE `password_resets` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`token_hash` varchar(64) NOT NULL,
	`user_id` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	`used_at` datetime(3),
	CONSTRAINT `password_resets_id` PRIMARY KEY(`id`),
	CONSTRAINT `password_resets_token` UNIQUE(`token_hash`)
);
--> statement-breakpoint
CREATE TABLE `person_names` (
	`user_id` bigint unsigned NOT NULL,
	`name` varchar(120) NOT NULL,
	CONSTRAINT `person_names_user_id` PRIMARY KEY(`user_id`)
);
--> statement-breakpoint
CREATE TABLE `sessions` (
	`sid` varchar(64) NOT NULL,
	`user_id` bigint unsigned,
	`data` json NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`expires_at` datetime(3) NOT NULL,
	CONSTRAINT `sessions_sid` PRIMARY KEY(`sid`)
);
--> statement-breakpoint
CREATE TABLE `sign_in_attempts` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`account_key` varchar(64) NOT NULL,
	`address_key` varchar(64) NOT NULL,
	`failed_at` datetime(3) NOT NULL,
	CONSTRAINT `sign_in_attempts_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `user_rooms` (
	`user_id` bigint unsigned NOT NULL,
	`room_id` bigint unsigned NOT NULL,
	CONSTRAINT `user_rooms_user_id_room_id_pk` PRIMARY KEY(`user_id`,`room_id`)
);
--> statement-breakpoint
CREATE TABLE `users` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`email` varchar(200) NOT NULL,
	`staff_code` varchar(32) NOT NULL,
	`role` varchar(20) NOT NULL,
	`password_hash` varchar(200) NOT NULL,
	`is_all_rooms` boolean NOT NULL DEFAULT false,
	`authz_version` int NOT NULL DEFAULT 1,
	`created_at` datetime(3) NOT NULL,
	`retired_at` datetime(3),
	CONSTRAINT `users_id` PRIMARY KEY(`id`),
	CONSTRAINT `users_email_unique` UNIQUE(`email`),
	CONSTRAINT `users_staffCode_unique` UNIQUE(`staff_code`)
);
--> statement-breakpoint
CREATE TABLE `demand_intervals` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned NOT NULL,
	`opening_op_id` varchar(36) NOT NULL,
	`closing_op_id` varchar(36) NOT NULL,
	`opened_at` datetime(3) NOT NULL,
	`closed_at` datetime(3) NOT NULL,
	`days` double NOT NULL,
	`exposure_days` double NOT NULL,
	`quantity` int NOT NULL,
	`is_censored` boolean NOT NULL,
	`is_used` boolean NOT NULL,
	`why` varchar(40),
	CONSTRAINT `demand_intervals_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `lead_time_observations` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`supplier_id` bigint unsigned NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`order_line_id` bigint unsigned NOT NULL,
	`ordered_at` datetime(3) NOT NULL,
	`arrived_at` datetime(3) NOT NULL,
	`days` double NOT NULL,
	CONSTRAINT `lead_time_observations_id` PRIMARY KEY(`id`),
	CONSTRAINT `lead_time_observations_orderLineId_unique` UNIQUE(`order_line_id`)
);
--> statement-breakpoint
CREATE TABLE `policies` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned NOT NULL,
	`is_current` boolean NOT NULL,
	`mode` varchar(20) NOT NULL,
	`method` varchar(40) NOT NULL,
	`target` double NOT NULL,
	`target_source` varchar(20) NOT NULL,
	`input` json,
	`result` json,
	`protection` json,
	`pending` json,
	`reorder_point` int,
	`par_level` int,
	`order_quantity` int,
	`cause` varchar(30) NOT NULL,
	`lower_counts` int NOT NULL,
	`last_count_op_id` varchar(36),
	`as_of` datetime(3) NOT NULL,
	`in_force_since` datetime(3) NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`confirmed_at` datetime(3) NOT NULL,
	CONSTRAINT `policies_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `policy_runs` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`started_at` datetime(3) NOT NULL,
	`finished_at` datetime(3),
	`cause` varchar(20) NOT NULL,
	`bins` int NOT NULL,
	`done` int NOT NULL,
	`last_bin_id` bigint unsigned,
	`changed` int NOT NULL,
	CONSTRAINT `policy_runs_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `draft_bins` (
	`bin_id` bigint unsigned NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	CONSTRAINT `draft_bins_bin_id` PRIMARY KEY(`bin_id`)
);
--> statement-breakpoint
CREATE TABLE `order_lines` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`order_id` bigint unsigned NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`assignment_id` bigint unsigned NOT NULL,
	`item_id` bigint unsigned NOT NULL,
	`packs` int NOT NULL,
	`pack_size` int NOT NULL,
	`order_unit` varchar(30) NOT NULL,
	`units` int NOT NULL,
	`cancelled_units` int NOT NULL,
	`price` double,
	CONSTRAINT `order_lines_id` PRIMARY KEY(`id`),
	CONSTRAINT `order_lines_order_bin` UNIQUE(`order_id`,`bin_id`)
);
--> statement-breakpoint
CREATE TABLE `order_numbers` (
	`year` int NOT NULL,
	`last` int NOT NULL,
	CONSTRAINT `order_numbers_year` PRIMARY KEY(`year`)
);
--> statement-breakpoint
CREATE TABLE `orders` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`number` varchar(20),
	`supplier_id` bigint unsigned NOT NULL,
	`state` varchar(20) NOT NULL,
	`outside_reference` varchar(60),
	`version` int NOT NULL,
	`created_by` bigint unsigned NOT NULL,
	`created_at` datetime(3) NOT NULL,
	`sent_by` bigint unsigned,
	`sent_at` datetime(3),
	`expected_on` date,
	`acknowledged_at` datetime(3),
	`closed_at` datetime(3),
	`cancelled_at` datetime(3),
	`cancel_reason` varchar(300),
	`confirmed_at` datetime(3),
	CONSTRAINT `orders_id` PRIMARY KEY(`id`),
	CONSTRAINT `orders_number_unique` UNIQUE(`number`)
);
--> statement-breakpoint
CREATE TABLE `pinned_floors` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned NOT NULL,
	`floor` int NOT NULL,
	`reason` varchar(300) NOT NULL,
	`set_by` bigint unsigned NOT NULL,
	`set_at` datetime(3) NOT NULL,
	`ended_at` datetime(3),
	CONSTRAINT `pinned_floors_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
CREATE TABLE `service_level_classes` (
	`ved` varchar(1) NOT NULL,
	`level` double NOT NULL,
	CONSTRAINT `service_level_classes_ved` PRIMARY KEY(`ved`)
);
--> statement-breakpoint
CREATE TABLE `service_level_overrides` (
	`id` bigint unsigned AUTO_INCREMENT NOT NULL,
	`bin_id` bigint unsigned,
	`item_id` bigint unsigned,
	`level` double NOT NULL,
	`reason` varchar(500) NOT NULL,
	`policy_reference` varchar(120) NOT NULL,
	`review_by` date NOT NULL,
	`state` varchar(12) NOT NULL,
	`proposed_by` bigint unsigned NOT NULL,
	`proposed_at` datetime(3) NOT NULL,
	`decided_by` bigint unsigned,
	`decided_at` datetime(3),
	`ended_by` bigint unsigned,
	`ended_at` datetime(3),
	CONSTRAINT `service_level_overrides_id` PRIMARY KEY(`id`)
);
--> statement-breakpoint
ALTER TABLE `bin_assignments` ADD CONSTRAINT `bin_assignments_bin_id_bins_id_fk` FOREIGN KEY (`bin_id`) REFERENCES `bins`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bin_assignments` ADD CONSTRAINT `bin_assignments_item_id_items_id_fk` FOREIGN KEY (`item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `bins` ADD CONSTRAINT `bins_room_id_rooms_id_fk` FOREIGN KEY (`room_id`) REFERENCES `rooms`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `item_barcodes` ADD CONSTRAINT `item_barcodes_item_id_items_id_fk` FOREIGN KEY (`item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `item_packs` ADD CONSTRAINT `item_packs_item_id_items_id_fk` FOREIGN KEY (`item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lookalikes` ADD CONSTRAINT `lookalikes_item_id_items_id_fk` FOREIGN KEY (`item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `lookalikes` ADD CONSTRAINT `lookalikes_other_item_id_items_id_fk` FOREIGN KEY (`other_item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `rooms` ADD CONSTRAINT `rooms_ward_id_wards_id_fk` FOREIGN KEY (`ward_id`) REFERENCES `wards`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `supply_agreements` ADD CONSTRAINT `supply_agreements_item_id_items_id_fk` FOREIGN KEY (`item_id`) REFERENCES `items`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `supply_agreements` ADD CONSTRAINT `supply_agreements_supplier_id_suppliers_id_fk` FOREIGN KEY (`supplier_id`) REFERENCES `suppliers`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `password_resets` ADD CONSTRAINT `password_resets_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `person_names` ADD CONSTRAINT `person_names_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `user_rooms` ADD CONSTRAINT `user_rooms_user_id_users_id_fk` FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `draft_bins` ADD CONSTRAINT `draft_bins_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE `order_lines` ADD CONSTRAINT `order_lines_order_id_orders_id_fk` FOREIGN KEY (`order_id`) REFERENCES `orders`(`id`) ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX `audit_log_subject` ON `audit_log` (`subject`,`subject_id`);--> statement-breakpoint
CREATE INDEX `audit_log_at` ON `audit_log` (`at`);--> statement-breakpoint
CREATE INDEX `bin_assignments_bin` ON `bin_assignments` (`bin_id`,`assigned_to`);--> statement-breakpoint
CREATE INDEX `bin_assignments_item` ON `bin_assignments` (`item_id`,`assigned_to`);--> statement-breakpoint
CREATE INDEX `bins_room` ON `bins` (`room_id`,`walk_order`);--> statement-breakpoint
CREATE INDEX `bins_overflow` ON `bins` (`overflow_of`);--> statement-breakpoint
CREATE INDEX `item_barcodes_item` ON `item_barcodes` (`item_id`);--> statement-breakpoint
CREATE INDEX `item_packs_item` ON `item_packs` (`item_id`,`valid_to`);--> statement-breakpoint
CREATE INDEX `items_name` ON `items` (`name`);--> statement-breakpoint
CREATE INDEX `bin_levels_room` ON `bin_levels` (`room_id`,`room_version`);--> statement-breakpoint
CREATE INDEX `movements_bin` ON `movements` (`bin_id`,`effective_at`);--> statement-breakpoint
CREATE INDEX `movements_target` ON `movements` (`target_op_id`);--> statement-breakpoint
CREATE INDEX `movements_order_line` ON `movements` (`order_line_id`);--> statement-breakpoint
CREATE INDEX `operations_bin` ON `operations` (`bin_id`,`received_at`);--> statement-breakpoint
CREATE INDEX `quarantine_open` ON `quarantine` (`closed_at`);--> statement-breakpoint
CREATE INDEX `recount_tasks_bin` ON `recount_tasks` (`bin_id`,`closed_at`);--> statement-breakpoint
CREATE INDEX `room_tombstones_room` ON `room_tombstones` (`room_id`,`room_version`);--> statement-breakpoint
CREATE INDEX `jobs_due` ON `jobs` (`run_at`);--> statement-breakpoint
CREATE INDEX `mail_outbox_due` ON `mail_outbox` (`state`,`next_at`);--> statement-breakpoint
CREATE INDEX `password_resets_user` ON `password_resets` (`user_id`);--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE INDEX `sessions_expires` ON `sessions` (`expires_at`);--> statement-breakpoint
CREATE INDEX `sign_in_attempts_account` ON `sign_in_attempts` (`account_key`,`failed_at`);--> statement-breakpoint
CREATE INDEX `sign_in_attempts_address` ON `sign_in_attempts` (`address_key`,`failed_at`);--> statement-breakpoint
CREATE INDEX `demand_intervals_bin` ON `demand_intervals` (`bin_id`,`closed_at`);--> statement-breakpoint
CREATE INDEX `lead_time_observations_supplier` ON `lead_time_observations` (`supplier_id`,`arrived_at`);--> statement-breakpoint
CREATE INDEX `policies_bin` ON `policies` (`bin_id`,`is_current`);--> statement-breakpoint
CREATE INDEX `policies_changed` ON `policies` (`in_force_since`);--> statement-breakpoint
CREATE INDEX `order_lines_bin` ON `order_lines` (`bin_id`);--> statement-breakpoint
CREATE INDEX `orders_state` ON `orders` (`state`,`supplier_id`);--> statement-breakpoint
CREATE INDEX `orders_sent` ON `orders` (`sent_at`);--> statement-breakpoint
CREATE INDEX `pinned_floors_bin` ON `pinned_floors` (`bin_id`,`ended_at`);--> statement-breakpoint
CREATE INDEX `service_level_overrides_bin` ON `service_level_overrides` (`bin_id`,`state`);--> statement-breakpoint
CREATE INDEX `service_level_overrides_item` ON `service_level_overrides` (`item_id`,`state`);