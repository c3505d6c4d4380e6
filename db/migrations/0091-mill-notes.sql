-- What a mill's settled jobs say of its pace, beside what they say of its yield (`realised_yield`, `yield_jobs`). `learns` is the sawyer's
-- switch: off, estimates go by 0.85 and the pace that was typed.
ALTER TABLE mill ADD COLUMN learns boolean NOT NULL DEFAULT true;
ALTER TABLE mill ADD COLUMN learned_pace integer CHECK (learned_pace > 0);
ALTER TABLE mill ADD COLUMN pace_jobs integer NOT NULL DEFAULT 0;
