CREATE TABLE "feed_batches" (
	"id" uuid PRIMARY KEY NOT NULL,
	"supplier_id" integer NOT NULL,
	"upload_id" uuid NOT NULL,
	"sha256" text NOT NULL,
	"idempotency_key" text,
	"storage_key" text,
	"receipt" jsonb NOT NULL,
	"is_in" boolean DEFAULT false NOT NULL,
	"received_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "feed_tokens" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"token_hash" text NOT NULL,
	"supplier_id" integer NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone NOT NULL,
	"last_used_at" timestamp with time zone,
	"revoked_at" timestamp with time zone,
	"minute_batches" integer DEFAULT 0 NOT NULL,
	"minute_start" timestamp with time zone
);
--> statement-breakpoint
ALTER TABLE "uploads" ADD COLUMN "feed_hour" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "feed_batches" ADD CONSTRAINT "feed_batches_supplier_id_suppliers_id_fk" FOREIGN KEY ("supplier_id") REFERENCES "public"."suppliers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "feed_batches" ADD CONSTRAINT "feed_batches_upload_id_uploads_id_fk" FOREIGN KEY ("upload_id") REFERENCES "public"."uploads"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "feed_tokens" ADD CONSTRAINT "feed_tokens_supplier_id_suppliers_id_fk" FOREIGN KEY ("supplier_id") REFERENCES "public"."suppliers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "feed_tokens" ADD CONSTRAINT "feed_tokens_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "feed_batches_sha256_key" ON "feed_batches" USING btree ("supplier_id","sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "feed_batches_idempotency_key" ON "feed_batches" USING btree ("supplier_id","idempotency_key");--> statement-breakpoint
CREATE INDEX "feed_batches_upload_idx" ON "feed_batches" USING btree ("upload_id");--> statement-breakpoint
CREATE INDEX "feed_batches_received_idx" ON "feed_batches" USING btree ("supplier_id","received_at");--> statement-breakpoint
CREATE UNIQUE INDEX "feed_tokens_hash_key" ON "feed_tokens" USING btree ("token_hash");--> statement-breakpoint
CREATE UNIQUE INDEX "uploads_feed_key" ON "uploads" USING btree ("supplier_id","feed_hour");