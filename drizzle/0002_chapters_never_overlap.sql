-- Two chapters of one clip never share a millisecond. Deferrable, so that one transaction may move
-- the edge between two neighbours in either order.
ALTER TABLE "chapters" ADD CONSTRAINT "chapters_never_overlap"
  EXCLUDE USING gist ("clip_id" WITH =, int4range("start_ms", "end_ms") WITH &&)
  DEFERRABLE INITIALLY IMMEDIATE;
