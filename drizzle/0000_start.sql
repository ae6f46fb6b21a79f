CREATE TABLE `arm_revisions` (
	`arm_id` text NOT NULL,
	`revision` integer NOT NULL,
	`model` text NOT NULL,
	`note` text NOT NULL,
	`by` text NOT NULL,
	`at_ms` integer NOT NULL,
	PRIMARY KEY(`arm_id`, `revision`),
	FOREIGN KEY (`arm_id`) REFERENCES `arms`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `arms` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`revision` integer NOT NULL,
	`unattended` integer DEFAULT false NOT NULL,
	`last_seen` text,
	`deleted` integer DEFAULT false NOT NULL,
	`updated_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `audit_log` (
	`seq` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`at_ms` integer NOT NULL,
	`who` text NOT NULL,
	`act` text NOT NULL,
	`arm` text,
	`detail` text NOT NULL,
	`result` text NOT NULL,
	`address` text NOT NULL,
	`hash` text NOT NULL
);
--> statement-breakpoint
CREATE TABLE `invitations` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`role` text NOT NULL,
	`invited_by` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`used_at_ms` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `invitations_token_hash_unique` ON `invitations` (`token_hash`);--> statement-breakpoint
CREATE TABLE `mails` (
	`id` text PRIMARY KEY NOT NULL,
	`to` text NOT NULL,
	`subject` text NOT NULL,
	`body` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`sent` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `people` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`email` text NOT NULL,
	`role` text NOT NULL,
	`password_hash` text NOT NULL,
	`disabled` integer DEFAULT false NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_ms` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `people_email_unique` ON `people` (`email`);--> statement-breakpoint
CREATE TABLE `pose_revisions` (
	`pose_id` text NOT NULL,
	`revision` integer NOT NULL,
	`q` text NOT NULL,
	`gripper` text,
	`trust` text NOT NULL,
	`origin` text NOT NULL,
	`by` text NOT NULL,
	`at_ms` integer NOT NULL,
	`arm_revision` integer NOT NULL,
	PRIMARY KEY(`pose_id`, `revision`),
	FOREIGN KEY (`pose_id`) REFERENCES `poses`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `poses` (
	`id` text PRIMARY KEY NOT NULL,
	`arm_id` text NOT NULL,
	`name` text NOT NULL,
	`note` text NOT NULL,
	`tags` text NOT NULL,
	`revision` integer NOT NULL,
	`deleted` integer DEFAULT false NOT NULL,
	FOREIGN KEY (`arm_id`) REFERENCES `arms`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `poses_arm` ON `poses` (`arm_id`);--> statement-breakpoint
CREATE TABLE `proven_programs` (
	`arm_id` text NOT NULL,
	`fingerprint` text NOT NULL,
	`who` text NOT NULL,
	`at_ms` integer NOT NULL,
	PRIMARY KEY(`arm_id`, `fingerprint`)
);
--> statement-breakpoint
CREATE TABLE `run_cycles` (
	`run_id` text NOT NULL,
	`cycle` integer NOT NULL,
	`seconds` text NOT NULL,
	`held` integer NOT NULL,
	`ended_at_ms` integer NOT NULL,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `run_cycles_one` ON `run_cycles` (`run_id`,`cycle`);--> statement-breakpoint
CREATE TABLE `runs` (
	`id` text PRIMARY KEY NOT NULL,
	`arm_id` text NOT NULL,
	`sequence_id` text NOT NULL,
	`sequence_name` text NOT NULL,
	`version` integer NOT NULL,
	`who` text NOT NULL,
	`trust` text NOT NULL,
	`arm_revision` integer NOT NULL,
	`started_at_ms` integer NOT NULL,
	`ended_at_ms` integer,
	`cycles_asked` integer,
	`cycles_done` integer DEFAULT 0 NOT NULL,
	`how` text,
	`detail` text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE INDEX `runs_arm` ON `runs` (`arm_id`,`started_at_ms`);--> statement-breakpoint
CREATE TABLE `sequence_versions` (
	`sequence_id` text NOT NULL,
	`version` integer NOT NULL,
	`name` text NOT NULL,
	`note` text NOT NULL,
	`steps` text NOT NULL,
	`by` text NOT NULL,
	`at_ms` integer NOT NULL,
	`approved_by` text,
	`approved_at_ms` integer,
	`approved_fingerprint` text,
	PRIMARY KEY(`sequence_id`, `version`),
	FOREIGN KEY (`sequence_id`) REFERENCES `sequences`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `sequences` (
	`id` text PRIMARY KEY NOT NULL,
	`arm_id` text NOT NULL,
	`version` integer NOT NULL,
	`deleted` integer DEFAULT false NOT NULL,
	FOREIGN KEY (`arm_id`) REFERENCES `arms`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sequences_arm` ON `sequences` (`arm_id`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`person_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`used_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`address` text NOT NULL,
	FOREIGN KEY (`person_id`) REFERENCES `people`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `sessions_token_hash_unique` ON `sessions` (`token_hash`);--> statement-breakpoint
CREATE INDEX `sessions_person` ON `sessions` (`person_id`);--> statement-breakpoint
CREATE TABLE `workshop` (
	`id` integer PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`demo` integer NOT NULL
);
