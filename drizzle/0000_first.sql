CREATE TABLE "password_tokens" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"purpose" text NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "sign_in_attempts" (
	"key" text PRIMARY KEY NOT NULL,
	"failures" integer NOT NULL,
	"window_start" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"role" text NOT NULL,
	"password_hash" text,
	"sessions_valid_from" timestamp with time zone DEFAULT now() NOT NULL,
	"disabled_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "settings" (
	"key" text PRIMARY KEY NOT NULL,
	"value" jsonb NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit_events" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp with time zone NOT NULL,
	"user_id" uuid,
	"actor" text NOT NULL,
	"action" text NOT NULL,
	"subject" text NOT NULL,
	"detail" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "corridors" (
	"id" serial PRIMARY KEY NOT NULL,
	"name" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "junctions" (
	"id" serial PRIMARY KEY NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"lat" double precision NOT NULL,
	"lon" double precision NOT NULL,
	"h3" text NOT NULL,
	"corridor_id" integer,
	"corridor_order" integer,
	"district" text,
	"cycle_s" integer,
	"last_retimed" date,
	"notes" text,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "exits" (
	"id" serial PRIMARY KEY NOT NULL,
	"code" text NOT NULL,
	"junction_id" integer NOT NULL,
	"bearing_deg" real NOT NULL,
	"line" double precision[] NOT NULL,
	"support" integer NOT NULL,
	"method_version" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "legs" (
	"id" serial PRIMARY KEY NOT NULL,
	"code" text NOT NULL,
	"junction_id" integer NOT NULL,
	"name" text NOT NULL,
	"bearing_deg" real NOT NULL,
	"line" double precision[] NOT NULL,
	"upstream_exit_id" integer,
	"storage_m" real,
	"free_speed_ms" real,
	"speed_limit_ms" real,
	"lanes" integer,
	"origin" text NOT NULL,
	"stop_line_origin" text NOT NULL,
	"locked" boolean DEFAULT false NOT NULL,
	"support" integer NOT NULL,
	"doubts" jsonb NOT NULL,
	"method_version" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "movements" (
	"id" serial PRIMARY KEY NOT NULL,
	"code" text NOT NULL,
	"leg_id" integer NOT NULL,
	"exit_id" integer NOT NULL,
	"turn_deg" real NOT NULL,
	"turn" text NOT NULL,
	"reference_s" real,
	"reference_source" text NOT NULL,
	"reference_n" integer NOT NULL,
	"cordon_up_m" real NOT NULL,
	"cordon_down_m" real NOT NULL,
	"method_version" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "screen_days" (
	"id" serial PRIMARY KEY NOT NULL,
	"upload_id" uuid NOT NULL,
	"day" integer NOT NULL,
	"method_version" integer NOT NULL,
	"median_interval_s" integer,
	"traversals" integer NOT NULL,
	"payload" "bytea" NOT NULL
);
--> statement-breakpoint
CREATE TABLE "suppliers" (
	"id" serial PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"mappings" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"file_name" text NOT NULL,
	"storage_key" text NOT NULL,
	"bytes" bigint NOT NULL,
	"sha256" text NOT NULL,
	"supplier_id" integer,
	"mapping" jsonb,
	"state" text NOT NULL,
	"progress" jsonb,
	"report" jsonb,
	"rejects_key" text,
	"failure" text,
	"created_by" uuid,
	"created_at" timestamp with time zone NOT NULL,
	"finished_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "traversals" (
	"local_day" date NOT NULL,
	"upload_id" uuid NOT NULL,
	"leg_id" integer NOT NULL,
	"movement_id" integer NOT NULL,
	"vehicle" bigint NOT NULL,
	"enter_at" timestamp with time zone NOT NULL,
	"stop_line_at" timestamp with time zone NOT NULL,
	"exit_at" timestamp with time zone NOT NULL,
	"delay_s" real NOT NULL,
	"stops" smallint NOT NULL,
	"stopped_s" real NOT NULL,
	"farthest_stop_m" real,
	"flags" smallint NOT NULL,
	"method_version" smallint NOT NULL,
	"track" "bytea" NOT NULL
) PARTITION BY LIST ("local_day");
--> statement-breakpoint
CREATE TABLE "hotspot_reports" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"title" text NOT NULL,
	"query" jsonb NOT NULL,
	"result" jsonb NOT NULL,
	"published_by" uuid,
	"published_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
ALTER TABLE "password_tokens" ADD CONSTRAINT "password_tokens_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "junctions" ADD CONSTRAINT "junctions_corridor_id_corridors_id_fk" FOREIGN KEY ("corridor_id") REFERENCES "public"."corridors"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "exits" ADD CONSTRAINT "exits_junction_id_junctions_id_fk" FOREIGN KEY ("junction_id") REFERENCES "public"."junctions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "legs" ADD CONSTRAINT "legs_junction_id_junctions_id_fk" FOREIGN KEY ("junction_id") REFERENCES "public"."junctions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "legs" ADD CONSTRAINT "legs_upstream_exit_id_exits_id_fk" FOREIGN KEY ("upstream_exit_id") REFERENCES "public"."exits"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_leg_id_legs_id_fk" FOREIGN KEY ("leg_id") REFERENCES "public"."legs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "movements" ADD CONSTRAINT "movements_exit_id_exits_id_fk" FOREIGN KEY ("exit_id") REFERENCES "public"."exits"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "screen_days" ADD CONSTRAINT "screen_days_upload_id_uploads_id_fk" FOREIGN KEY ("upload_id") REFERENCES "public"."uploads"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_supplier_id_suppliers_id_fk" FOREIGN KEY ("supplier_id") REFERENCES "public"."suppliers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hotspot_reports" ADD CONSTRAINT "hotspot_reports_published_by_users_id_fk" FOREIGN KEY ("published_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "password_tokens_user_idx" ON "password_tokens" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "users_email_key" ON "users" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "audit_events_at_idx" ON "audit_events" USING btree ("at");--> statement-breakpoint
CREATE UNIQUE INDEX "corridors_name_key" ON "corridors" USING btree ("name");--> statement-breakpoint
CREATE UNIQUE INDEX "junctions_code_key" ON "junctions" USING btree ("code");--> statement-breakpoint
CREATE INDEX "junctions_corridor_idx" ON "junctions" USING btree ("corridor_id","corridor_order");--> statement-breakpoint
CREATE INDEX "junctions_h3_idx" ON "junctions" USING btree ("h3");--> statement-breakpoint
CREATE UNIQUE INDEX "exits_code_key" ON "exits" USING btree ("code");--> statement-breakpoint
CREATE INDEX "exits_junction_idx" ON "exits" USING btree ("junction_id");--> statement-breakpoint
CREATE UNIQUE INDEX "legs_code_key" ON "legs" USING btree ("code");--> statement-breakpoint
CREATE INDEX "legs_junction_idx" ON "legs" USING btree ("junction_id");--> statement-breakpoint
CREATE UNIQUE INDEX "movements_code_key" ON "movements" USING btree ("code");--> statement-breakpoint
CREATE INDEX "movements_leg_idx" ON "movements" USING btree ("leg_id");--> statement-breakpoint
CREATE UNIQUE INDEX "screen_days_upload_day_key" ON "screen_days" USING btree ("upload_id","day");--> statement-breakpoint
CREATE INDEX "screen_days_day_idx" ON "screen_days" USING btree ("day");--> statement-breakpoint
CREATE UNIQUE INDEX "suppliers_name_key" ON "suppliers" USING btree ("name");--> statement-breakpoint
CREATE INDEX "uploads_created_idx" ON "uploads" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "uploads_sha256_idx" ON "uploads" USING btree ("sha256");--> statement-breakpoint
CREATE INDEX "traversals_leg_idx" ON "traversals" USING btree ("leg_id","stop_line_at");--> statement-breakpoint
CREATE INDEX "traversals_upload_idx" ON "traversals" USING btree ("upload_id");--> statement-breakpoint
CREATE INDEX "hotspot_reports_published_idx" ON "hotspot_reports" USING btree ("published_at");