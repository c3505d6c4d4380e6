-- Live bids by how their cut list was planned: the worker plans the older ones anew.
CREATE INDEX bid_list_version ON bid ((coalesce((cut_list ->> 'version')::int, 0)), updated_at) WHERE status IN ('open', 'chosen');
