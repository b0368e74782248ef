CREATE TABLE "ping_clouds" (
	"junction_id" integer NOT NULL,
	"upload_id" uuid NOT NULL,
	"payload" "bytea" NOT NULL,
	CONSTRAINT "ping_clouds_junction_id_upload_id_pk" PRIMARY KEY("junction_id","upload_id")
);
--> statement-breakpoint
ALTER TABLE "ping_clouds" ADD CONSTRAINT "ping_clouds_junction_id_junctions_id_fk" FOREIGN KEY ("junction_id") REFERENCES "public"."junctions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ping_clouds" ADD CONSTRAINT "ping_clouds_upload_id_uploads_id_fk" FOREIGN KEY ("upload_id") REFERENCES "public"."uploads"("id") ON DELETE cascade ON UPDATE no action;