CREATE TABLE "certificate_documents" (
	"id" uuid PRIMARY KEY NOT NULL,
	"certificate_id" uuid NOT NULL,
	"format" text NOT NULL,
	"sha256" text NOT NULL,
	"size" bigint NOT NULL
);
--> statement-breakpoint
CREATE TABLE "certificates" (
	"id" uuid PRIMARY KEY NOT NULL,
	"number" text NOT NULL,
	"issue" integer NOT NULL,
	"order_id" uuid NOT NULL,
	"state" text NOT NULL,
	"replaces_id" uuid,
	"reason" text,
	"determination_ids" uuid[] NOT NULL,
	"deviations" text DEFAULT '' NOT NULL,
	"snapshot" jsonb,
	"sha256" text,
	"signature" text,
	"key_id" text,
	"code" text,
	"drafted_by_id" uuid NOT NULL,
	"drafted_at" timestamp (3) with time zone NOT NULL,
	"released_by_id" uuid,
	"released_at" timestamp (3) with time zone,
	"withdrawn_at" timestamp (3) with time zone,
	"withdrawal_reason" text,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "determinations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"specimen_id" uuid NOT NULL,
	"basis" text NOT NULL,
	"number" integer NOT NULL,
	"state" text NOT NULL,
	"result" jsonb NOT NULL,
	"fit_ids" uuid[] NOT NULL,
	"acknowledgements" jsonb NOT NULL,
	"comment" text DEFAULT '' NOT NULL,
	"composed_by_id" uuid NOT NULL,
	"composed_at" timestamp (3) with time zone NOT NULL,
	"submitted_by_id" uuid,
	"submitted_at" timestamp (3) with time zone,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "reviews" (
	"id" uuid PRIMARY KEY NOT NULL,
	"determination_id" uuid NOT NULL,
	"decision" text NOT NULL,
	"reason" text NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "calibrations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"instrument_id" uuid NOT NULL,
	"calibrated_on" date NOT NULL,
	"due_on" date NOT NULL,
	"certificate" text NOT NULL,
	"laboratory" text NOT NULL,
	"relative" boolean NOT NULL,
	"expanded_uncertainty" double precision NOT NULL,
	"coverage_factor" double precision NOT NULL,
	"correction" double precision NOT NULL,
	"entered_by_id" uuid NOT NULL,
	"entered_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "instruments" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"maker" text NOT NULL,
	"model" text NOT NULL,
	"serial" text NOT NULL,
	"location" text NOT NULL,
	"unit" text NOT NULL,
	"resolution" double precision NOT NULL,
	"range_low" double precision,
	"range_high" double precision,
	"in_service" boolean DEFAULT true NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "instruments_name_unique" UNIQUE("name")
);
--> statement-breakpoint
CREATE TABLE "methods" (
	"id" uuid PRIMARY KEY NOT NULL,
	"code" text NOT NULL,
	"version_number" integer NOT NULL,
	"name" text NOT NULL,
	"kind" text NOT NULL,
	"standard" text NOT NULL,
	"description" text NOT NULL,
	"cautions" text NOT NULL,
	"created_by_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "reference_checks" (
	"id" uuid PRIMARY KEY NOT NULL,
	"piece_id" uuid NOT NULL,
	"value" double precision NOT NULL,
	"expanded_uncertainty" double precision NOT NULL,
	"checked_at" timestamp (3) with time zone NOT NULL,
	"person_id" uuid NOT NULL
);
--> statement-breakpoint
CREATE TABLE "reference_pieces" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"quantity" text NOT NULL,
	"known_value" double precision NOT NULL,
	"known_expanded_uncertainty" double precision NOT NULL,
	"unit" text NOT NULL,
	"instrument_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "reference_pieces_name_unique" UNIQUE("name")
);
--> statement-breakpoint
CREATE TABLE "orders" (
	"id" uuid PRIMARY KEY NOT NULL,
	"number" text NOT NULL,
	"customer_id" uuid NOT NULL,
	"title" text NOT NULL,
	"state" text NOT NULL,
	"customer_reference" text NOT NULL,
	"material_description" text NOT NULL,
	"constants_wanted" text[] NOT NULL,
	"kinds_of_run" text[] NOT NULL,
	"limits" jsonb NOT NULL,
	"due_on" date,
	"notes" text NOT NULL,
	"requested_by_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "orders_number_unique" UNIQUE("number")
);
--> statement-breakpoint
CREATE TABLE "samples" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"mark" text NOT NULL,
	"material" text NOT NULL,
	"material_class" text NOT NULL,
	"description" text NOT NULL,
	"received_on" date NOT NULL,
	"condition" text NOT NULL,
	"sampled_on" date,
	"sampled_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "specimen_marks" (
	"sample_id" uuid PRIMARY KEY NOT NULL,
	"last" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "specimens" (
	"id" uuid PRIMARY KEY NOT NULL,
	"sample_id" uuid NOT NULL,
	"mark" text NOT NULL,
	"shape" text NOT NULL,
	"orientation" text NOT NULL,
	"moisture" text NOT NULL,
	"notes" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "customers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"address" text NOT NULL,
	"contact_email" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "customers_name_unique" UNIQUE("name")
);
--> statement-breakpoint
CREATE TABLE "laboratory" (
	"id" integer PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"address" text NOT NULL,
	"time_zone" text NOT NULL,
	"separation_of_duties" boolean DEFAULT true NOT NULL,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "number_series" (
	"series" text PRIMARY KEY NOT NULL,
	"last" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"roles" text[] NOT NULL,
	"customer_id" uuid,
	"active" boolean DEFAULT true NOT NULL,
	"decimal_style" text DEFAULT '.' NOT NULL,
	"last_sign_in_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "people_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"family_id" uuid NOT NULL,
	"token_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"used_at" timestamp (3) with time zone,
	"revoked_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "answered_requests" (
	"key" text PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"body_sha256" text NOT NULL,
	"noun_id" uuid NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "readings" (
	"id" uuid PRIMARY KEY NOT NULL,
	"specimen_id" uuid NOT NULL,
	"quantity" text NOT NULL,
	"station" integer NOT NULL,
	"value" double precision NOT NULL,
	"typed_value" double precision NOT NULL,
	"unit" text NOT NULL,
	"instrument_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"read_at" timestamp (3) with time zone NOT NULL,
	"supersedes_id" uuid,
	"reason" text
);
--> statement-breakpoint
CREATE TABLE "record_entries" (
	"sequence" bigint PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"person_id" uuid,
	"person_name" text,
	"action" text NOT NULL,
	"noun" text NOT NULL,
	"noun_id" text NOT NULL,
	"details" jsonb NOT NULL,
	"hash" text NOT NULL,
	"previous_hash" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "adoptions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"fit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fits" (
	"id" uuid PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"state" text NOT NULL,
	"progress" double precision DEFAULT 0 NOT NULL,
	"settings" jsonb NOT NULL,
	"requested_by_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"started_at" timestamp (3) with time zone,
	"finished_at" timestamp (3) with time zone,
	"software_version" text NOT NULL,
	"inputs_sha256" text,
	"result" jsonb,
	"error" text,
	"findings_when_refused" jsonb DEFAULT '[]'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "outbox" (
	"id" uuid PRIMARY KEY NOT NULL,
	"queue" text NOT NULL,
	"job_id" text NOT NULL,
	"payload" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"dispatched_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "remembered_layouts" (
	"id" uuid PRIMARY KEY NOT NULL,
	"instrument_id" uuid NOT NULL,
	"signature" text NOT NULL,
	"layout" jsonb NOT NULL,
	"confirmed_by_id" uuid NOT NULL,
	"confirmed_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "run_files" (
	"id" uuid PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"name" text NOT NULL,
	"purpose" text NOT NULL,
	"sha256" text NOT NULL,
	"size" bigint NOT NULL,
	"media_type" text NOT NULL,
	"layout" jsonb NOT NULL,
	"layout_origin" text NOT NULL,
	"confidence" double precision NOT NULL,
	"remarks" jsonb NOT NULL,
	"row_count" integer NOT NULL,
	"confirmed_by_id" uuid
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY NOT NULL,
	"specimen_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"kind" text NOT NULL,
	"state" text NOT NULL,
	"void_reason" text,
	"method_id" uuid NOT NULL,
	"performed_by_id" uuid NOT NULL,
	"performed_at" timestamp (3) with time zone NOT NULL,
	"conditions" jsonb NOT NULL,
	"instruments" jsonb NOT NULL,
	"record" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
ALTER TABLE "certificate_documents" ADD CONSTRAINT "certificate_documents_certificate_id_certificates_id_fk" FOREIGN KEY ("certificate_id") REFERENCES "public"."certificates"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "certificates" ADD CONSTRAINT "certificates_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "certificates" ADD CONSTRAINT "certificates_drafted_by_id_people_id_fk" FOREIGN KEY ("drafted_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "certificates" ADD CONSTRAINT "certificates_released_by_id_people_id_fk" FOREIGN KEY ("released_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "determinations" ADD CONSTRAINT "determinations_specimen_id_specimens_id_fk" FOREIGN KEY ("specimen_id") REFERENCES "public"."specimens"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "determinations" ADD CONSTRAINT "determinations_composed_by_id_people_id_fk" FOREIGN KEY ("composed_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "determinations" ADD CONSTRAINT "determinations_submitted_by_id_people_id_fk" FOREIGN KEY ("submitted_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_determination_id_determinations_id_fk" FOREIGN KEY ("determination_id") REFERENCES "public"."determinations"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reviews" ADD CONSTRAINT "reviews_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "calibrations" ADD CONSTRAINT "calibrations_instrument_id_instruments_id_fk" FOREIGN KEY ("instrument_id") REFERENCES "public"."instruments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "calibrations" ADD CONSTRAINT "calibrations_entered_by_id_people_id_fk" FOREIGN KEY ("entered_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "methods" ADD CONSTRAINT "methods_created_by_id_people_id_fk" FOREIGN KEY ("created_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reference_checks" ADD CONSTRAINT "reference_checks_piece_id_reference_pieces_id_fk" FOREIGN KEY ("piece_id") REFERENCES "public"."reference_pieces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reference_checks" ADD CONSTRAINT "reference_checks_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reference_pieces" ADD CONSTRAINT "reference_pieces_instrument_id_instruments_id_fk" FOREIGN KEY ("instrument_id") REFERENCES "public"."instruments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "orders" ADD CONSTRAINT "orders_customer_id_customers_id_fk" FOREIGN KEY ("customer_id") REFERENCES "public"."customers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "orders" ADD CONSTRAINT "orders_requested_by_id_people_id_fk" FOREIGN KEY ("requested_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "samples" ADD CONSTRAINT "samples_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "specimen_marks" ADD CONSTRAINT "specimen_marks_sample_id_samples_id_fk" FOREIGN KEY ("sample_id") REFERENCES "public"."samples"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "specimens" ADD CONSTRAINT "specimens_sample_id_samples_id_fk" FOREIGN KEY ("sample_id") REFERENCES "public"."samples"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "people" ADD CONSTRAINT "people_customer_id_customers_id_fk" FOREIGN KEY ("customer_id") REFERENCES "public"."customers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_specimen_id_specimens_id_fk" FOREIGN KEY ("specimen_id") REFERENCES "public"."specimens"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_instrument_id_instruments_id_fk" FOREIGN KEY ("instrument_id") REFERENCES "public"."instruments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adoptions" ADD CONSTRAINT "adoptions_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adoptions" ADD CONSTRAINT "adoptions_fit_id_fits_id_fk" FOREIGN KEY ("fit_id") REFERENCES "public"."fits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "adoptions" ADD CONSTRAINT "adoptions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fits" ADD CONSTRAINT "fits_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fits" ADD CONSTRAINT "fits_requested_by_id_people_id_fk" FOREIGN KEY ("requested_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "remembered_layouts" ADD CONSTRAINT "remembered_layouts_instrument_id_instruments_id_fk" FOREIGN KEY ("instrument_id") REFERENCES "public"."instruments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "remembered_layouts" ADD CONSTRAINT "remembered_layouts_confirmed_by_id_people_id_fk" FOREIGN KEY ("confirmed_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_files" ADD CONSTRAINT "run_files_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_files" ADD CONSTRAINT "run_files_confirmed_by_id_people_id_fk" FOREIGN KEY ("confirmed_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_specimen_id_specimens_id_fk" FOREIGN KEY ("specimen_id") REFERENCES "public"."specimens"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_method_id_methods_id_fk" FOREIGN KEY ("method_id") REFERENCES "public"."methods"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_performed_by_id_people_id_fk" FOREIGN KEY ("performed_by_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "certificate_documents_format" ON "certificate_documents" USING btree ("certificate_id","format");--> statement-breakpoint
CREATE INDEX "certificate_documents_sha256" ON "certificate_documents" USING btree ("sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "certificates_issue" ON "certificates" USING btree ("number","issue");--> statement-breakpoint
CREATE INDEX "certificates_order" ON "certificates" USING btree ("order_id");--> statement-breakpoint
CREATE INDEX "certificates_state" ON "certificates" USING btree ("state");--> statement-breakpoint
CREATE UNIQUE INDEX "determinations_number" ON "determinations" USING btree ("specimen_id","basis","number");--> statement-breakpoint
CREATE INDEX "determinations_state" ON "determinations" USING btree ("state");--> statement-breakpoint
CREATE INDEX "reviews_determination" ON "reviews" USING btree ("determination_id");--> statement-breakpoint
CREATE INDEX "calibrations_instrument" ON "calibrations" USING btree ("instrument_id","calibrated_on");--> statement-breakpoint
CREATE INDEX "instruments_kind" ON "instruments" USING btree ("kind");--> statement-breakpoint
CREATE UNIQUE INDEX "methods_version" ON "methods" USING btree ("code","version_number");--> statement-breakpoint
CREATE INDEX "reference_checks_piece" ON "reference_checks" USING btree ("piece_id","checked_at");--> statement-breakpoint
CREATE INDEX "orders_customer" ON "orders" USING btree ("customer_id");--> statement-breakpoint
CREATE INDEX "orders_state" ON "orders" USING btree ("state");--> statement-breakpoint
CREATE UNIQUE INDEX "samples_mark" ON "samples" USING btree ("order_id","mark");--> statement-breakpoint
CREATE UNIQUE INDEX "specimens_mark" ON "specimens" USING btree ("sample_id","mark");--> statement-breakpoint
CREATE INDEX "specimens_created" ON "specimens" USING btree ("created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "sessions_token" ON "sessions" USING btree ("token_hash");--> statement-breakpoint
CREATE INDEX "sessions_family" ON "sessions" USING btree ("family_id");--> statement-breakpoint
CREATE INDEX "sessions_person" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "readings_specimen" ON "readings" USING btree ("specimen_id");--> statement-breakpoint
CREATE UNIQUE INDEX "readings_supersedes" ON "readings" USING btree ("supersedes_id");--> statement-breakpoint
CREATE INDEX "record_noun" ON "record_entries" USING btree ("noun","noun_id");--> statement-breakpoint
CREATE INDEX "record_action" ON "record_entries" USING btree ("action");--> statement-breakpoint
CREATE INDEX "record_person" ON "record_entries" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "record_at" ON "record_entries" USING btree ("at");--> statement-breakpoint
CREATE INDEX "adoptions_run" ON "adoptions" USING btree ("run_id","at");--> statement-breakpoint
CREATE INDEX "adoptions_fit" ON "adoptions" USING btree ("fit_id");--> statement-breakpoint
CREATE UNIQUE INDEX "fits_number" ON "fits" USING btree ("run_id","number");--> statement-breakpoint
CREATE INDEX "fits_state" ON "fits" USING btree ("state");--> statement-breakpoint
CREATE UNIQUE INDEX "outbox_job" ON "outbox" USING btree ("queue","job_id");--> statement-breakpoint
CREATE INDEX "outbox_waiting" ON "outbox" USING btree ("dispatched_at","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "remembered_layouts_signature" ON "remembered_layouts" USING btree ("instrument_id","signature");--> statement-breakpoint
CREATE UNIQUE INDEX "run_files_position" ON "run_files" USING btree ("run_id","position");--> statement-breakpoint
CREATE INDEX "run_files_sha256" ON "run_files" USING btree ("sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "runs_number" ON "runs" USING btree ("specimen_id","number");--> statement-breakpoint
CREATE INDEX "runs_created" ON "runs" USING btree ("created_at");