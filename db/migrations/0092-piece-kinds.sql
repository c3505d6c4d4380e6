-- A piece of a cut list may be a timber that boxes the heart, one free of heart centre, or a live-edge slab.
ALTER TABLE piece ADD COLUMN kind text NOT NULL DEFAULT 'board' CHECK (kind IN ('board', 'boxed-heart', 'free-of-heart', 'slab'));
