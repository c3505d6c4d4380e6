-- The air that boards dry in, a month at a time, as the landowner typed it: `[{ "month": 8, "temperatureF": 70, "humidityPct": 65 }]`, and where
-- the figures are from. No table is built in, and nothing is assumed until somebody types it.
ALTER TABLE drying_plan ADD COLUMN months jsonb NOT NULL DEFAULT '[]' CHECK (jsonb_typeof(months) = 'array' AND jsonb_array_length(months) <= 12);
ALTER TABLE drying_plan ADD COLUMN air_source text NOT NULL DEFAULT '' CHECK (length(air_source) <= 200);
ALTER TABLE drying_plan ALTER COLUMN temperature_f DROP NOT NULL;
ALTER TABLE drying_plan ALTER COLUMN humidity_pct DROP NOT NULL;
