CREATE TABLE "companies" (
	"id" uuid PRIMARY KEY NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"zone" text NOT NULL,
	"rules" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"revision" bigint DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "companies_slug_unique" UNIQUE("slug"),
	CONSTRAINT "companies_slug" CHECK ("companies"."slug" ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length("companies"."slug") <= 60)
);
--> statement-breakpoint
ALTER TABLE "companies" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "members" (
	"company_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"role" text NOT NULL,
	"name" text NOT NULL,
	"phone_e164" text,
	"email" "citext",
	"language" text DEFAULT 'en' NOT NULL,
	"skills" text[] DEFAULT '{}' NOT NULL,
	"natural_key" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "members_company_id_person_id_pk" PRIMARY KEY("company_id","person_id"),
	CONSTRAINT "members_role" CHECK ("members"."role" in ('owner', 'dispatcher', 'foreman', 'finisher', 'sub')),
	CONSTRAINT "members_language" CHECK ("members"."language" in ('en', 'es')),
	CONSTRAINT "members_phone" CHECK ("members"."phone_e164" ~ '^\+[1-9][0-9]{1,14}$')
);
--> statement-breakpoint
ALTER TABLE "members" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" "citext",
	"password_hash" text,
	"language" text DEFAULT 'en' NOT NULL,
	"zone" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "people_email_unique" UNIQUE("email"),
	CONSTRAINT "people_language" CHECK ("people"."language" in ('en', 'es'))
);
--> statement-breakpoint
ALTER TABLE "people" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "person_busy" (
	"id" uuid PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"whole_days" boolean DEFAULT false NOT NULL,
	"note" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "person_busy_range" CHECK (not isempty("person_busy"."during") and lower("person_busy"."during") is not null and upper("person_busy"."during") is not null)
);
--> statement-breakpoint
ALTER TABLE "person_busy" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "crew_memberships" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"crew_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"starts_at" timestamp with time zone NOT NULL,
	"ends_at" timestamp with time zone,
	CONSTRAINT "crew_memberships_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "crew_memberships_order" CHECK ("crew_memberships"."ends_at" is null or "crew_memberships"."ends_at" > "crew_memberships"."starts_at")
);
--> statement-breakpoint
ALTER TABLE "crew_memberships" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "crews" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"natural_key" text NOT NULL,
	"foreman_id" uuid,
	"sort_order" integer DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "crews_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "crews_natural_key" UNIQUE("company_id","natural_key")
);
--> statement-breakpoint
ALTER TABLE "crews" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "audit" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor_person_id" uuid,
	"action" text NOT NULL,
	"subject_kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"before" jsonb,
	"after" jsonb,
	"reason" text,
	CONSTRAINT "audit_company_id_id_pk" PRIMARY KEY("company_id","id")
);
--> statement-breakpoint
ALTER TABLE "audit" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "board_changes" (
	"company_id" uuid NOT NULL,
	"revision" bigint NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor_person_id" uuid,
	"kind" text NOT NULL,
	"visit_ids" uuid[] NOT NULL,
	"patch" jsonb NOT NULL,
	"inverse" jsonb,
	"undone_by_revision" bigint,
	CONSTRAINT "board_changes_company_id_revision_pk" PRIMARY KEY("company_id","revision")
);
--> statement-breakpoint
ALTER TABLE "board_changes" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "idempotency_keys" (
	"company_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"key" text NOT NULL,
	"request_hash" text NOT NULL,
	"status" integer NOT NULL,
	"body" jsonb,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_keys_company_id_person_id_key_pk" PRIMARY KEY("company_id","person_id","key")
);
--> statement-breakpoint
ALTER TABLE "idempotency_keys" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "imports" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"kind" text NOT NULL,
	"file_name" text NOT NULL,
	"sheet_name" text,
	"encoding" text NOT NULL,
	"rows" jsonb NOT NULL,
	"mapping" jsonb NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"result" jsonb,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"accepted_at" timestamp with time zone,
	CONSTRAINT "imports_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "imports_kind" CHECK ("imports"."kind" in ('people', 'crews', 'sites', 'pours')),
	CONSTRAINT "imports_state" CHECK ("imports"."state" in ('open', 'accepted', 'discarded'))
);
--> statement-breakpoint
ALTER TABLE "imports" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "links" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"token_hash" text NOT NULL,
	"visit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "links_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "links_token_hash_unique" UNIQUE("token_hash")
);
--> statement-breakpoint
ALTER TABLE "links" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "notices" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"channel" text NOT NULL,
	"language" text NOT NULL,
	"to_address" text NOT NULL,
	"subject" text,
	"body" text NOT NULL,
	"state" text DEFAULT 'queued' NOT NULL,
	"provider_id" text,
	"error_code" text,
	"error" text,
	"attempts" integer DEFAULT 0 NOT NULL,
	"queued_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	"delivered_at" timestamp with time zone,
	CONSTRAINT "notices_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "notices_channel" CHECK ("notices"."channel" in ('sms', 'email')),
	CONSTRAINT "notices_language" CHECK ("notices"."language" in ('en', 'es')),
	CONSTRAINT "notices_state" CHECK ("notices"."state" in ('queued', 'sending', 'sent', 'delivered', 'failed', 'unsure'))
);
--> statement-breakpoint
ALTER TABLE "notices" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "outbox" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"due_at" timestamp with time zone NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"done_at" timestamp with time zone,
	CONSTRAINT "outbox_company_id_id_pk" PRIMARY KEY("company_id","id")
);
--> statement-breakpoint
ALTER TABLE "outbox" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "silenced_numbers" (
	"phone_e164" text PRIMARY KEY NOT NULL,
	"silenced_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "silenced_numbers" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "told" (
	"company_id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"facts" jsonb NOT NULL,
	"told_at" timestamp with time zone NOT NULL,
	CONSTRAINT "told_company_id_visit_id_person_id_pk" PRIMARY KEY("company_id","visit_id","person_id")
);
--> statement-breakpoint
ALTER TABLE "told" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "pour_slabs" (
	"company_id" uuid NOT NULL,
	"pour_id" uuid NOT NULL,
	"slab_id" uuid NOT NULL,
	CONSTRAINT "pour_slabs_company_id_pour_id_slab_id_pk" PRIMARY KEY("company_id","pour_id","slab_id")
);
--> statement-breakpoint
ALTER TABLE "pour_slabs" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "pours" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"site_id" uuid NOT NULL,
	"name" text NOT NULL,
	"natural_key" text NOT NULL,
	"job_ref" text,
	"ordered_yd3" numeric(9, 3) NOT NULL,
	"mix_id" uuid,
	"finish" text NOT NULL,
	"placing_method" text NOT NULL,
	"jointing" text DEFAULT 'saw-conventional' NOT NULL,
	"placing_rate_yd3_per_hour" numeric(9, 3),
	"load_yd3" numeric(9, 3),
	"set_up_min" integer,
	"concrete_temp_f" numeric(12, 4),
	"people_to_place" integer,
	"people_to_finish" integer,
	"pump_id" uuid,
	"will_call" boolean DEFAULT false NOT NULL,
	"readiness" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"notes" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "pours_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "pours_natural_key" UNIQUE("company_id","natural_key"),
	CONSTRAINT "pours_finish" CHECK ("pours"."finish" in ('float', 'broom', 'trowel', 'hard-trowel', 'exposed', 'stamped')),
	CONSTRAINT "pours_placing_method" CHECK ("pours"."placing_method" in ('chute', 'buggy', 'line-pump', 'boom-pump')),
	CONSTRAINT "pours_jointing" CHECK ("pours"."jointing" in ('saw-conventional', 'saw-early-entry', 'tooled', 'none')),
	CONSTRAINT "pours_amounts" CHECK ("pours"."ordered_yd3" > 0 and "pours"."placing_rate_yd3_per_hour" > 0 and "pours"."load_yd3" > 0)
);
--> statement-breakpoint
ALTER TABLE "pours" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "sections" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"slab_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"shape" text NOT NULL,
	"opening" boolean DEFAULT false NOT NULL,
	"length_ft" numeric(12, 4),
	"width_ft" numeric(12, 4),
	"diameter_ft" numeric(12, 4),
	"width_in" numeric(12, 4),
	"extra_depth_in" numeric(12, 4),
	"thickness_in" numeric(12, 4),
	"points_ft" jsonb,
	CONSTRAINT "sections_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "sections_position" UNIQUE("company_id","slab_id","position"),
	CONSTRAINT "sections_shape" CHECK ("sections"."shape" in ('rectangle', 'polygon', 'circle', 'strip')),
	CONSTRAINT "sections_measures" CHECK (case "sections"."shape"
        when 'rectangle' then "sections"."length_ft" > 0 and "sections"."width_ft" > 0
        when 'circle' then "sections"."diameter_ft" > 0
        when 'strip' then "sections"."length_ft" > 0 and "sections"."width_in" > 0 and "sections"."extra_depth_in" > 0
        else jsonb_array_length("sections"."points_ft") >= 3 end)
);
--> statement-breakpoint
ALTER TABLE "sections" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "sites" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"natural_key" text NOT NULL,
	"address" text NOT NULL,
	"zone" text NOT NULL,
	"lat_deg" double precision,
	"lon_deg" double precision,
	"permitted_from_min" integer,
	"permitted_until_min" integer,
	"customer_name" text,
	"access_notes" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "sites_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "sites_natural_key" UNIQUE("company_id","natural_key"),
	CONSTRAINT "sites_position" CHECK (("sites"."lat_deg" is null) = ("sites"."lon_deg" is null) and "sites"."lat_deg" between -90 and 90 and "sites"."lon_deg" between -180 and 180),
	CONSTRAINT "sites_permitted" CHECK ("sites"."permitted_from_min" is null or "sites"."permitted_until_min" is null or "sites"."permitted_until_min" > "sites"."permitted_from_min")
);
--> statement-breakpoint
ALTER TABLE "sites" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "slabs" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"name" text NOT NULL,
	"thickness_in" numeric(12, 4) NOT NULL,
	"area_ft2" numeric(12, 4) NOT NULL,
	"volume_yd3" numeric(12, 4) NOT NULL,
	"base" text,
	"vapour_retarder" boolean DEFAULT false NOT NULL,
	"reinforcement" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "slabs_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "slabs_sizes" CHECK ("slabs"."thickness_in" > 0 and "slabs"."area_ft2" >= 0 and "slabs"."volume_yd3" >= 0)
);
--> statement-breakpoint
ALTER TABLE "slabs" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "equipment" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"kind" text NOT NULL,
	"name" text NOT NULL,
	"boom" boolean DEFAULT false NOT NULL,
	"reach_ft" numeric(12, 4),
	"output_yd3_per_hour" numeric(9, 3),
	"set_up_min" integer DEFAULT 30 NOT NULL,
	"wash_out_min" integer DEFAULT 30 NOT NULL,
	"travel_min" integer DEFAULT 30 NOT NULL,
	"operator_email" text,
	"operator_phone_e164" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "equipment_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "equipment_name" UNIQUE("company_id","name"),
	CONSTRAINT "equipment_kind" CHECK ("equipment"."kind" in ('pump', 'laser-screed', 'ride-on-trowel', 'saw', 'blankets', 'other')),
	CONSTRAINT "equipment_minutes" CHECK ("equipment"."set_up_min" >= 0 and "equipment"."wash_out_min" >= 0 and "equipment"."travel_min" >= 0)
);
--> statement-breakpoint
ALTER TABLE "equipment" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "mixes" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"plant_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"strength_psi" integer NOT NULL,
	"slump_in" numeric(12, 4),
	"cement" text DEFAULT 'type-i' NOT NULL,
	"discharge_limit_min" integer,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "mixes_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "mixes_code" UNIQUE("company_id","plant_id","code"),
	CONSTRAINT "mixes_plant_and_id" UNIQUE("company_id","plant_id","id"),
	CONSTRAINT "mixes_cement" CHECK ("mixes"."cement" in ('type-i', 'type-ii', 'type-iii')),
	CONSTRAINT "mixes_strength" CHECK ("mixes"."strength_psi" > 0)
);
--> statement-breakpoint
ALTER TABLE "mixes" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "plants" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"zone" text NOT NULL,
	"lat_deg" double precision,
	"lon_deg" double precision,
	"max_yd3_per_hour" numeric(9, 3),
	"short_load_yd3" numeric(9, 3),
	"order_step_yd3" numeric(9, 3) DEFAULT '0.25' NOT NULL,
	"hours" jsonb NOT NULL,
	"closed_days" date[] DEFAULT '{}' NOT NULL,
	"order_email" text,
	"order_phone_e164" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "plants_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "plants_name" UNIQUE("company_id","name"),
	CONSTRAINT "plants_hours" CHECK (jsonb_array_length("plants"."hours") = 7)
);
--> statement-breakpoint
ALTER TABLE "plants" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "sessions" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"user_agent" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "equipment_bookings" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"equipment_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"held" "tstzrange" NOT NULL,
	"starts_at" timestamp with time zone GENERATED ALWAYS AS (lower("equipment_bookings"."during")) STORED,
	"state" text DEFAULT 'drafted' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "equipment_bookings_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "equipment_bookings_state" CHECK ("equipment_bookings"."state" in ('drafted', 'sent', 'confirmed', 'countered', 'refused', 'called-off')),
	CONSTRAINT "equipment_bookings_ranges" CHECK ((not isempty("equipment_bookings"."during") and lower_inc("equipment_bookings"."during") and not upper_inc("equipment_bookings"."during") and lower("equipment_bookings"."during") is not null and upper("equipment_bookings"."during") is not null) and (not isempty("equipment_bookings"."held") and lower_inc("equipment_bookings"."held") and not upper_inc("equipment_bookings"."held") and lower("equipment_bookings"."held") is not null and upper("equipment_bookings"."held") is not null) and "equipment_bookings"."held" @> "equipment_bookings"."during")
);
--> statement-breakpoint
ALTER TABLE "equipment_bookings" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "mix_orders" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"plant_id" uuid NOT NULL,
	"mix_id" uuid NOT NULL,
	"ordered_yd3" numeric(9, 3) NOT NULL,
	"load_yd3" numeric(9, 3) NOT NULL,
	"spacing_min" numeric(9, 3) NOT NULL,
	"during" "tstzrange" NOT NULL,
	"starts_at" timestamp with time zone GENERATED ALWAYS AS (lower("mix_orders"."during")) STORED,
	"state" text DEFAULT 'drafted' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "mix_orders_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "mix_orders_state" CHECK ("mix_orders"."state" in ('drafted', 'sent', 'confirmed', 'countered', 'refused', 'called-off')),
	CONSTRAINT "mix_orders_during" CHECK ((not isempty("mix_orders"."during") and lower_inc("mix_orders"."during") and not upper_inc("mix_orders"."during") and lower("mix_orders"."during") is not null and upper("mix_orders"."during") is not null)),
	CONSTRAINT "mix_orders_amounts" CHECK ("mix_orders"."ordered_yd3" > 0 and "mix_orders"."load_yd3" > 0 and "mix_orders"."spacing_min" > 0)
);
--> statement-breakpoint
ALTER TABLE "mix_orders" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "offers" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"held" "tstzrange" NOT NULL,
	"starts_at" timestamp with time zone GENERATED ALWAYS AS (lower("offers"."during")) STORED,
	"state" text DEFAULT 'open' NOT NULL,
	"answered_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "offers_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "offers_state" CHECK ("offers"."state" in ('open', 'accepted', 'declined', 'lapsed', 'withdrawn')),
	CONSTRAINT "offers_ranges" CHECK ((not isempty("offers"."during") and lower_inc("offers"."during") and not upper_inc("offers"."during") and lower("offers"."during") is not null and upper("offers"."during") is not null) and (not isempty("offers"."held") and lower_inc("offers"."held") and not upper_inc("offers"."held") and lower("offers"."held") is not null and upper("offers"."held") is not null) and "offers"."held" @> "offers"."during")
);
--> statement-breakpoint
ALTER TABLE "offers" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "shifts" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"visit_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"during" "tstzrange" NOT NULL,
	"held" "tstzrange" NOT NULL,
	"starts_at" timestamp with time zone GENERATED ALWAYS AS (lower("shifts"."during")) STORED,
	"state" text DEFAULT 'held' NOT NULL,
	"answer" text DEFAULT 'none' NOT NULL,
	"answered_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "shifts_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "shifts_state" CHECK ("shifts"."state" in ('held', 'released')),
	CONSTRAINT "shifts_answer" CHECK ("shifts"."answer" in ('none', 'yes', 'no')),
	CONSTRAINT "shifts_ranges" CHECK ((not isempty("shifts"."during") and lower_inc("shifts"."during") and not upper_inc("shifts"."during") and lower("shifts"."during") is not null and upper("shifts"."during") is not null) and (not isempty("shifts"."held") and lower_inc("shifts"."held") and not upper_inc("shifts"."held") and lower("shifts"."held") is not null and upper("shifts"."held") is not null) and "shifts"."held" @> "shifts"."during")
);
--> statement-breakpoint
ALTER TABLE "shifts" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
CREATE TABLE "visits" (
	"company_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"kind" text NOT NULL,
	"state" text DEFAULT 'waiting' NOT NULL,
	"site_id" uuid NOT NULL,
	"crew_id" uuid,
	"pour_id" uuid,
	"part_yd3" numeric(9, 3),
	"title" text NOT NULL,
	"during" "tstzrange",
	"starts_at" timestamp with time zone GENERATED ALWAYS AS (lower("visits"."during")) STORED,
	"wanted_on" date,
	"planned_min" integer DEFAULT 240 NOT NULL,
	"window" "tstzrange",
	"caused_by_visit_id" uuid,
	"accepted_codes" text[] DEFAULT '{}' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "visits_company_id_id_pk" PRIMARY KEY("company_id","id"),
	CONSTRAINT "visits_kind" CHECK ("visits"."kind" in ('prep', 'pour', 'saw', 'strip', 'protect', 'seal', 'other')),
	CONSTRAINT "visits_state" CHECK ("visits"."state" in ('waiting', 'pencilled', 'firm', 'done', 'called-off')),
	CONSTRAINT "visits_placed" CHECK ("visits"."state" not in ('pencilled', 'firm', 'done') or ("visits"."crew_id" is not null and "visits"."during" is not null)),
	CONSTRAINT "visits_waiting" CHECK ("visits"."state" <> 'waiting' or ("visits"."crew_id" is null and "visits"."during" is null)),
	CONSTRAINT "visits_pour_part" CHECK (("visits"."kind" = 'pour') = ("visits"."pour_id" is not null and "visits"."part_yd3" is not null)),
	CONSTRAINT "visits_during" CHECK ("visits"."during" is null or (not isempty("visits"."during") and lower_inc("visits"."during") and not upper_inc("visits"."during") and lower("visits"."during") is not null and upper("visits"."during") is not null)),
	CONSTRAINT "visits_planned" CHECK ("visits"."planned_min" > 0)
);
--> statement-breakpoint
ALTER TABLE "visits" ENABLE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "members" ADD CONSTRAINT "members_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "members" ADD CONSTRAINT "members_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "person_busy" ADD CONSTRAINT "person_busy_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crew_memberships" ADD CONSTRAINT "crew_memberships_crew_fk" FOREIGN KEY ("company_id","crew_id") REFERENCES "public"."crews"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crew_memberships" ADD CONSTRAINT "crew_memberships_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crews" ADD CONSTRAINT "crews_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crews" ADD CONSTRAINT "crews_foreman" FOREIGN KEY ("company_id","foreman_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "board_changes" ADD CONSTRAINT "board_changes_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "idempotency_keys" ADD CONSTRAINT "idempotency_keys_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "imports" ADD CONSTRAINT "imports_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "links" ADD CONSTRAINT "links_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "links" ADD CONSTRAINT "links_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notices" ADD CONSTRAINT "notices_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notices" ADD CONSTRAINT "notices_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "outbox" ADD CONSTRAINT "outbox_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "told" ADD CONSTRAINT "told_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "told" ADD CONSTRAINT "told_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pour_slabs" ADD CONSTRAINT "pour_slabs_pour_fk" FOREIGN KEY ("company_id","pour_id") REFERENCES "public"."pours"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pour_slabs" ADD CONSTRAINT "pour_slabs_slab_fk" FOREIGN KEY ("company_id","slab_id") REFERENCES "public"."slabs"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pours" ADD CONSTRAINT "pours_site_fk" FOREIGN KEY ("company_id","site_id") REFERENCES "public"."sites"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pours" ADD CONSTRAINT "pours_mix_fk" FOREIGN KEY ("company_id","mix_id") REFERENCES "public"."mixes"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "pours" ADD CONSTRAINT "pours_pump_fk" FOREIGN KEY ("company_id","pump_id") REFERENCES "public"."equipment"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sections" ADD CONSTRAINT "sections_slab_fk" FOREIGN KEY ("company_id","slab_id") REFERENCES "public"."slabs"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sites" ADD CONSTRAINT "sites_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "slabs" ADD CONSTRAINT "slabs_site_fk" FOREIGN KEY ("company_id","site_id") REFERENCES "public"."sites"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "equipment" ADD CONSTRAINT "equipment_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mixes" ADD CONSTRAINT "mixes_plant_fk" FOREIGN KEY ("company_id","plant_id") REFERENCES "public"."plants"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plants" ADD CONSTRAINT "plants_company_id_companies_id_fk" FOREIGN KEY ("company_id") REFERENCES "public"."companies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "equipment_bookings" ADD CONSTRAINT "equipment_bookings_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "equipment_bookings" ADD CONSTRAINT "equipment_bookings_equipment_fk" FOREIGN KEY ("company_id","equipment_id") REFERENCES "public"."equipment"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mix_orders" ADD CONSTRAINT "mix_orders_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mix_orders" ADD CONSTRAINT "mix_orders_plant_fk" FOREIGN KEY ("company_id","plant_id") REFERENCES "public"."plants"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mix_orders" ADD CONSTRAINT "mix_orders_mix_fk" FOREIGN KEY ("company_id","plant_id","mix_id") REFERENCES "public"."mixes"("company_id","plant_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "offers" ADD CONSTRAINT "offers_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "offers" ADD CONSTRAINT "offers_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "shifts" ADD CONSTRAINT "shifts_visit_fk" FOREIGN KEY ("company_id","visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "shifts" ADD CONSTRAINT "shifts_person_fk" FOREIGN KEY ("company_id","person_id") REFERENCES "public"."members"("company_id","person_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "visits" ADD CONSTRAINT "visits_site_fk" FOREIGN KEY ("company_id","site_id") REFERENCES "public"."sites"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "visits" ADD CONSTRAINT "visits_crew_fk" FOREIGN KEY ("company_id","crew_id") REFERENCES "public"."crews"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "visits" ADD CONSTRAINT "visits_pour_fk" FOREIGN KEY ("company_id","pour_id") REFERENCES "public"."pours"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "visits" ADD CONSTRAINT "visits_caused_by_fk" FOREIGN KEY ("company_id","caused_by_visit_id") REFERENCES "public"."visits"("company_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "members_person" ON "members" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "person_busy_person" ON "person_busy" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "crew_memberships_crew" ON "crew_memberships" USING btree ("company_id","crew_id");--> statement-breakpoint
CREATE INDEX "crew_memberships_person" ON "crew_memberships" USING btree ("company_id","person_id");--> statement-breakpoint
CREATE INDEX "audit_subject" ON "audit" USING btree ("company_id","subject_kind","subject_id");--> statement-breakpoint
CREATE INDEX "links_visit_person" ON "links" USING btree ("company_id","visit_id","person_id");--> statement-breakpoint
CREATE INDEX "notices_queued_at" ON "notices" USING btree ("company_id","queued_at");--> statement-breakpoint
CREATE INDEX "notices_visit" ON "notices" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE UNIQUE INDEX "notices_provider_id" ON "notices" USING btree ("provider_id") WHERE provider_id is not null;--> statement-breakpoint
CREATE INDEX "notices_to_address" ON "notices" USING btree ("to_address","queued_at");--> statement-breakpoint
CREATE INDEX "outbox_visit" ON "outbox" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE INDEX "pours_site" ON "pours" USING btree ("company_id","site_id");--> statement-breakpoint
CREATE INDEX "slabs_site" ON "slabs" USING btree ("company_id","site_id");--> statement-breakpoint
CREATE INDEX "sessions_person" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "equipment_bookings_visit" ON "equipment_bookings" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE INDEX "equipment_bookings_starts_at" ON "equipment_bookings" USING btree ("company_id","starts_at");--> statement-breakpoint
CREATE INDEX "mix_orders_visit" ON "mix_orders" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE INDEX "mix_orders_starts_at" ON "mix_orders" USING btree ("company_id","starts_at");--> statement-breakpoint
CREATE INDEX "offers_visit" ON "offers" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE INDEX "offers_starts_at" ON "offers" USING btree ("company_id","starts_at");--> statement-breakpoint
CREATE INDEX "offers_person" ON "offers" USING btree ("person_id","starts_at");--> statement-breakpoint
CREATE INDEX "shifts_visit" ON "shifts" USING btree ("company_id","visit_id");--> statement-breakpoint
CREATE INDEX "shifts_starts_at" ON "shifts" USING btree ("company_id","starts_at");--> statement-breakpoint
CREATE INDEX "shifts_person" ON "shifts" USING btree ("person_id","starts_at");--> statement-breakpoint
CREATE INDEX "visits_starts_at" ON "visits" USING btree ("company_id","starts_at");--> statement-breakpoint
CREATE INDEX "visits_state" ON "visits" USING btree ("company_id","state");--> statement-breakpoint
CREATE INDEX "visits_site" ON "visits" USING btree ("company_id","site_id");--> statement-breakpoint
CREATE INDEX "visits_pour" ON "visits" USING btree ("company_id","pour_id");--> statement-breakpoint
CREATE POLICY "companies_current" ON "companies" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("companies"."id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("companies"."id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "companies_own" ON "companies" AS PERMISSIVE FOR SELECT TO "app_web" USING (exists (select 1 from members m where m.company_id = "companies"."id" and m.person_id = nullif(current_setting('app.person_id', true), '')::uuid and m.ended_at is null));--> statement-breakpoint
CREATE POLICY "members_company" ON "members" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("members"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("members"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "members_own" ON "members" AS PERMISSIVE FOR SELECT TO "app_web" USING ("members"."person_id" = nullif(current_setting('app.person_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "people_self" ON "people" AS PERMISSIVE FOR ALL TO "app_web" USING ("people"."id" = nullif(current_setting('app.person_id', true), '')::uuid) WITH CHECK ("people"."id" = nullif(current_setting('app.person_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "people_of_company" ON "people" AS PERMISSIVE FOR SELECT TO "app_web", "app_worker" USING (exists (select 1 from members m where m.person_id = "people"."id" and m.company_id = nullif(current_setting('app.company_id', true), '')::uuid));--> statement-breakpoint
CREATE POLICY "person_busy_self" ON "person_busy" AS PERMISSIVE FOR ALL TO "app_web" USING ("person_busy"."person_id" = nullif(current_setting('app.person_id', true), '')::uuid) WITH CHECK ("person_busy"."person_id" = nullif(current_setting('app.person_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "crew_memberships_company" ON "crew_memberships" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("crew_memberships"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("crew_memberships"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "crews_company" ON "crews" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("crews"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("crews"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "audit_company" ON "audit" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("audit"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("audit"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "board_changes_company" ON "board_changes" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("board_changes"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("board_changes"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "idempotency_keys_company" ON "idempotency_keys" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("idempotency_keys"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("idempotency_keys"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "imports_company" ON "imports" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("imports"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("imports"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "links_company" ON "links" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("links"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("links"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "notices_company" ON "notices" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("notices"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("notices"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "outbox_company" ON "outbox" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("outbox"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("outbox"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "silenced_numbers_all" ON "silenced_numbers" AS PERMISSIVE FOR ALL TO "app_web", "app_worker" USING (true) WITH CHECK (true);--> statement-breakpoint
CREATE POLICY "told_company" ON "told" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("told"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("told"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "pour_slabs_company" ON "pour_slabs" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("pour_slabs"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("pour_slabs"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "pours_company" ON "pours" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("pours"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("pours"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "sections_company" ON "sections" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("sections"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("sections"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "sites_company" ON "sites" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("sites"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("sites"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "slabs_company" ON "slabs" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("slabs"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("slabs"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "equipment_company" ON "equipment" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("equipment"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("equipment"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "mixes_company" ON "mixes" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("mixes"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("mixes"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "plants_company" ON "plants" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("plants"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("plants"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "equipment_bookings_company" ON "equipment_bookings" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("equipment_bookings"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("equipment_bookings"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "mix_orders_company" ON "mix_orders" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("mix_orders"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("mix_orders"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "offers_company" ON "offers" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("offers"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("offers"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "offers_own" ON "offers" AS PERMISSIVE FOR SELECT TO "app_web" USING ("offers"."person_id" = nullif(current_setting('app.person_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "shifts_company" ON "shifts" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("shifts"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("shifts"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "shifts_own" ON "shifts" AS PERMISSIVE FOR SELECT TO "app_web" USING ("shifts"."person_id" = nullif(current_setting('app.person_id', true), '')::uuid);--> statement-breakpoint
CREATE POLICY "visits_company" ON "visits" AS PERMISSIVE FOR ALL TO "app_owner", "app_web", "app_worker" USING ("visits"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid) WITH CHECK ("visits"."company_id" = nullif(current_setting('app.company_id', true), '')::uuid);