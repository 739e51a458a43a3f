ALTER TABLE "cars" ADD COLUMN "seat_behind_nose_m" double precision;--> statement-breakpoint
ALTER TABLE "cars" ADD COLUMN "aerial_behind_nose_m" double precision;--> statement-breakpoint
ALTER TABLE "wheel_setups" ADD COLUMN "driven" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "wheel_setups" ADD COLUMN "second_channel" integer;--> statement-breakpoint
ALTER TABLE "cars" ADD CONSTRAINT "cars_seat_in_car" CHECK ("cars"."seat_behind_nose_m" between 0 and 20);--> statement-breakpoint
ALTER TABLE "cars" ADD CONSTRAINT "cars_aerial_on_car" CHECK ("cars"."aerial_behind_nose_m" between 0 and 20);--> statement-breakpoint
ALTER TABLE "cars" ADD CONSTRAINT "cars_offsets_together" CHECK (("cars"."seat_behind_nose_m" is null) = ("cars"."aerial_behind_nose_m" is null));--> statement-breakpoint
ALTER TABLE "wheel_setups" ADD CONSTRAINT "wheel_setups_second_channel_range" CHECK ("wheel_setups"."second_channel" between 0 and 15);--> statement-breakpoint
ALTER TABLE "wheel_setups" ADD CONSTRAINT "wheel_setups_second_channel_other" CHECK ("wheel_setups"."second_channel" <> "wheel_setups"."channel");