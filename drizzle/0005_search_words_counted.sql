-- Counts of spoken stems follow their passages, whichever way those come and go (services, cascades from a
-- deleted clip, session or chapter). Statement triggers: one pass for all rows of a statement. Counters of one
-- build are taken by one transaction at a time, so that two of them never wait for each other's words.
ALTER TABLE "search_words" SET (fillfactor = 80);--> statement-breakpoint
CREATE FUNCTION "passages_counted_in"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_advisory_xact_lock(72426, hashtext(build_id::text)) FROM (SELECT DISTINCT build_id FROM came ORDER BY build_id) builds;
  INSERT INTO search_words AS kept (build_id, stem, word, passages)
    SELECT build_id, stem, stem, count(*) FROM (
      SELECT build_id, unnest(tsvector_to_array(lexemes)) AS stem FROM came
      UNION ALL SELECT build_id, '' FROM came
    ) spoken
    WHERE strpos(stem, ':') = 0 GROUP BY build_id, stem
  ON CONFLICT (build_id, stem) DO UPDATE SET passages = kept.passages + excluded.passages;
  RETURN NULL;
END $$;--> statement-breakpoint
CREATE FUNCTION "passages_counted_out"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_advisory_xact_lock(72426, hashtext(build_id::text)) FROM (SELECT DISTINCT build_id FROM went ORDER BY build_id) builds;
  UPDATE search_words kept SET passages = greatest(0, kept.passages - gone.n) FROM (
    SELECT build_id, stem, count(*) AS n FROM (
      SELECT build_id, unnest(tsvector_to_array(lexemes)) AS stem FROM went
      UNION ALL SELECT build_id, '' FROM went
    ) spoken
    WHERE strpos(stem, ':') = 0 GROUP BY build_id, stem
  ) gone
  WHERE kept.build_id = gone.build_id AND kept.stem = gone.stem;
  RETURN NULL;
END $$;--> statement-breakpoint
CREATE TRIGGER "passages_came" AFTER INSERT ON "passages"
  REFERENCING NEW TABLE AS came FOR EACH STATEMENT EXECUTE FUNCTION passages_counted_in();--> statement-breakpoint
CREATE TRIGGER "passages_went" AFTER DELETE ON "passages"
  REFERENCING OLD TABLE AS went FOR EACH STATEMENT EXECUTE FUNCTION passages_counted_out();
