-- Keeps the spatial index of a table true when others change the table: the
-- triggers of the R-tree extension (OGC 12-128r17, annex F.3), TABLE and INDEX
-- standing for the names of the table and of its index.
CREATE TRIGGER "INDEX_insert" AFTER INSERT ON "TABLE"
  WHEN (new."geom" NOT NULL AND NOT ST_IsEmpty(NEW."geom"))
BEGIN
  INSERT OR REPLACE INTO "INDEX" VALUES (
    NEW."fid",
    ST_MinX(NEW."geom"), ST_MaxX(NEW."geom"),
    ST_MinY(NEW."geom"), ST_MaxY(NEW."geom")
  );
END;
CREATE TRIGGER "INDEX_update1" AFTER UPDATE OF "geom" ON "TABLE"
  WHEN OLD."fid" = NEW."fid" AND (NEW."geom" NOTNULL AND NOT ST_IsEmpty(NEW."geom"))
BEGIN
  INSERT OR REPLACE INTO "INDEX" VALUES (
    NEW."fid",
    ST_MinX(NEW."geom"), ST_MaxX(NEW."geom"),
    ST_MinY(NEW."geom"), ST_MaxY(NEW."geom")
  );
END;
CREATE TRIGGER "INDEX_update2" AFTER UPDATE OF "geom" ON "TABLE"
  WHEN OLD."fid" = NEW."fid" AND (NEW."geom" ISNULL OR ST_IsEmpty(NEW."geom"))
BEGIN
  DELETE FROM "INDEX" WHERE id = OLD."fid";
END;
CREATE TRIGGER "INDEX_update3" AFTER UPDATE ON "TABLE"
  WHEN OLD."fid" != NEW."fid" AND (NEW."geom" NOTNULL AND NOT ST_IsEmpty(NEW."geom"))
BEGIN
  DELETE FROM "INDEX" WHERE id = OLD."fid";
  INSERT OR REPLACE INTO "INDEX" VALUES (
    NEW."fid",
    ST_MinX(NEW."geom"), ST_MaxX(NEW."geom"),
    ST_MinY(NEW."geom"), ST_MaxY(NEW."geom")
  );
END;
CREATE TRIGGER "INDEX_update4" AFTER UPDATE ON "TABLE"
  WHEN OLD."fid" != NEW."fid" AND (NEW."geom" ISNULL OR ST_IsEmpty(NEW."geom"))
BEGIN
  DELETE FROM "INDEX" WHERE id IN (OLD."fid", NEW."fid");
END;
CREATE TRIGGER "INDEX_delete" AFTER DELETE ON "TABLE"
  WHEN old."geom" NOT NULL
BEGIN
  DELETE FROM "INDEX" WHERE id = OLD."fid";
END;
