-- When both sides were sent the list for the next day: once a day, however often the sweep runs.
ALTER TABLE booked_day ADD COLUMN evening_told_at timestamptz;
CREATE INDEX booked_day_to_tell ON booked_day (day) WHERE active AND evening_told_at IS NULL;
