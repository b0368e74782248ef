CREATE TABLE "ingest_pieces" (
	"id" serial PRIMARY KEY NOT NULL,
	"run" uuid NOT NULL,
	"upload_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"inputs" text NOT NULL,
	"number" integer NOT NULL,
	"done_at" timestamp with time zone
);
--> statement-breakpoint
ALTER TABLE "ingest_pieces" ADD CONSTRAINT "ingest_pieces_upload_id_uploads_id_fk" FOREIGN KEY ("upload_id") REFERENCES "public"."uploads"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "ingest_pieces_run_idx" ON "ingest_pieces" USING btree ("run","id");