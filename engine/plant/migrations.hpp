// The tables, guards and roles on the server, told as the steps from one version of the format to the next.
// Every function that writes runs with the owner's rights and an empty search path, so that a login can
// neither do without it nor put a function of its own in between. FORMAT.md says what they mean.
#pragma once

#include <array>
#include <cstdint>
#include <string_view>

namespace bathwright::plant {

inline constexpr std::array<std::string_view, 1> migrations{// Version 1.
                                                            R"sql(
DO $$
DECLARE role text;
BEGIN
  -- roles belong to the whole server: another database of it may have made them
  FOREACH role IN ARRAY ARRAY['bathwright_operator', 'bathwright_chemist', 'bathwright_auditor'] LOOP
    IF NOT EXISTS (SELECT FROM pg_catalog.pg_roles WHERE rolname = role) THEN
      EXECUTE pg_catalog.format('CREATE ROLE %I NOLOGIN', role);
    END IF;
  END LOOP;
END $$;

CREATE TABLE bathwright.site_of_login (
  login text COLLATE "C" NOT NULL,
  site  text COLLATE "C" NOT NULL CHECK (site <> '' AND length(site) <= 200 AND site !~ '[[:cntrl:]]'),
  PRIMARY KEY (login, site)
);

CREATE TABLE bathwright.entry (
  chain     text COLLATE "C" NOT NULL CHECK (chain ~ '^[0-9a-f]{64}$'),
  seq       bigint NOT NULL CHECK (seq >= 1),
  site      text COLLATE "C" NOT NULL,
  form      int NOT NULL,
  kind      text COLLATE "C" NOT NULL,
  tank      text COLLATE "C" NOT NULL,
  shift     text COLLATE "C" NOT NULL,
  at        text COLLATE "C" NOT NULL,
  happened  text COLLATE "C" NOT NULL,
  boot      text COLLATE "C" NOT NULL,
  uptime_ms bigint NOT NULL,
  station   text COLLATE "C" NOT NULL,
  "by"      text COLLATE "C" NOT NULL,
  role      text COLLATE "C" NOT NULL,
  witness   text COLLATE "C" NOT NULL,
  body      text COLLATE "C" NOT NULL,
  about     bigint,
  program   text COLLATE "C" NOT NULL,
  bath_type text COLLATE "C" NOT NULL,
  previous  text COLLATE "C" NOT NULL CHECK (previous ~ '^[0-9a-f]{64}$'),
  signature text COLLATE "C" NOT NULL,
  witness_signature text COLLATE "C" NOT NULL,
  hash      text COLLATE "C" NOT NULL UNIQUE CHECK (hash ~ '^[0-9a-f]{64}$'),
  arrival   bigint NOT NULL UNIQUE,
  received  text COLLATE "C" NOT NULL,
  login     text COLLATE "C" NOT NULL,
  PRIMARY KEY (chain, seq)
);
CREATE INDEX entry_by_tank ON bathwright.entry (tank, kind, arrival);
CREATE INDEX entry_by_time ON bathwright.entry (at, arrival);
CREATE INDEX entry_by_answered ON bathwright.entry (chain, about, kind) WHERE about IS NOT NULL;

CREATE TABLE bathwright.anchor (
  number    bigint PRIMARY KEY,
  site      text COLLATE "C" NOT NULL,
  chain     text COLLATE "C" NOT NULL,
  first_seq bigint NOT NULL,
  last_seq  bigint NOT NULL,
  last_hash text COLLATE "C" NOT NULL,
  arrival   bigint NOT NULL UNIQUE,
  received  text COLLATE "C" NOT NULL,
  login     text COLLATE "C" NOT NULL,
  previous  text COLLATE "C" NOT NULL,
  hash      text COLLATE "C" NOT NULL UNIQUE
);
CREATE INDEX anchor_by_chain ON bathwright.anchor (chain, number);

CREATE FUNCTION bathwright.sites() RETURNS SETOF text
  LANGUAGE sql STABLE SECURITY DEFINER SET search_path = pg_catalog, pg_temp
  AS $$ SELECT site FROM bathwright.site_of_login WHERE login = session_user $$;

CREATE FUNCTION bathwright.no_change() RETURNS trigger
  LANGUAGE plpgsql SECURITY DEFINER SET search_path = pg_catalog, pg_temp
  AS $$
BEGIN
  RAISE EXCEPTION 'log entries and anchors are never changed or deleted; add a correction' USING ERRCODE = 'BW001';
END $$;

-- Whoever inserts holds the rows of format until the end of the transaction: arrivals and anchors are numbered
-- in the order of the commits, without gaps.
CREATE FUNCTION bathwright.entry_in_turn() RETURNS trigger
  LANGUAGE plpgsql SECURITY DEFINER SET search_path = pg_catalog, pg_temp
  AS $$
BEGIN
  PERFORM FROM bathwright.format FOR UPDATE;
  RETURN NULL;
END $$;

CREATE FUNCTION bathwright.entry_arrives() RETURNS trigger
  LANGUAGE plpgsql SECURITY DEFINER SET search_path = pg_catalog, pg_temp
  AS $$
DECLARE
  there record;
BEGIN
  IF NEW.site IS NULL THEN
    IF (SELECT count(*) FROM bathwright.sites()) <> 1 THEN
      RAISE EXCEPTION 'login % is bound to no site or to several', session_user
        USING ERRCODE = 'BW002', HINT = 'name the site';
    END IF;
    NEW.site := bathwright.sites();
  END IF;
  IF NEW.site = '*' OR NOT EXISTS (SELECT FROM bathwright.sites() AS s WHERE s = NEW.site) THEN
    RAISE EXCEPTION 'login % may not write for site %', session_user, NEW.site
      USING ERRCODE = 'BW002', HINT = 'ask the administrator to bind the login to the site';
  END IF;
  IF NEW.kind IN ('setting', 'dump') AND NOT pg_has_role(session_user, 'bathwright_chemist', 'MEMBER') THEN
    RAISE EXCEPTION 'entry % is of kind %, which login % may not write', NEW.seq, NEW.kind, session_user
      USING ERRCODE = 'BW003', DETAIL = NEW.seq, HINT = 'send this log with a login of role chemist';
  END IF;

  SELECT hash INTO there FROM bathwright.entry WHERE chain = NEW.chain AND seq = NEW.seq;
  IF FOUND THEN
    IF there.hash = NEW.hash THEN RETURN NULL; END IF;
    RAISE EXCEPTION 'the server has another entry % of this log', NEW.seq USING ERRCODE = 'BW004';
  END IF;
  SELECT seq, hash, site INTO there FROM bathwright.entry WHERE chain = NEW.chain ORDER BY seq DESC LIMIT 1;
  IF NOT FOUND THEN
    IF NEW.seq <> 1 OR NEW.previous <> repeat('0', 64) OR NEW.chain <> NEW.hash THEN
      RAISE EXCEPTION 'entry % is not the first of its log', NEW.seq USING ERRCODE = 'BW005';
    END IF;
  ELSIF NEW.seq <> there.seq + 1 OR NEW.previous <> there.hash THEN
    RAISE EXCEPTION 'entry % does not follow entry %, the last the server has', NEW.seq, there.seq
      USING ERRCODE = 'BW005';
  ELSIF NEW.site <> there.site THEN
    RAISE EXCEPTION 'this log is of site %, not of %', there.site, NEW.site USING ERRCODE = 'BW002';
  END IF;

  NEW.arrival := (SELECT coalesce(max(arrival), 0) + 1 FROM bathwright.entry);
  NEW.received := to_char(statement_timestamp() AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"');
  NEW.login := session_user;
  RETURN NEW;
END $$;

-- One anchor seals what one statement brought; its text has one reading, as none of its fields holds a line end.
CREATE FUNCTION bathwright.entry_anchored() RETURNS trigger
  LANGUAGE plpgsql SECURITY DEFINER SET search_path = pg_catalog, pg_temp
  AS $$
DECLARE
  first record;
  last record;
  before record;
BEGIN
  SELECT * INTO first FROM arrived ORDER BY arrival LIMIT 1;
  IF NOT FOUND THEN RETURN NULL; END IF;
  IF EXISTS (SELECT FROM arrived WHERE chain <> first.chain) THEN
    RAISE EXCEPTION 'entries of several logs in one statement' USING ERRCODE = 'BW005';
  END IF;
  SELECT * INTO last FROM arrived ORDER BY arrival DESC LIMIT 1;
  SELECT number, hash INTO before FROM bathwright.anchor ORDER BY number DESC LIMIT 1;
  IF NOT FOUND THEN
    SELECT 0::bigint AS number, repeat('0', 64) AS hash INTO before;
  END IF;
  INSERT INTO bathwright.anchor VALUES (
    before.number + 1, last.site, last.chain, first.seq, last.seq, last.hash, last.arrival, last.received,
    last.login, before.hash,
    encode(sha256(convert_to(concat_ws(E'\n', 'bathwright anchor 1', before.number + 1, last.site, last.chain,
      first.seq, last.seq, last.hash, last.arrival, last.received, last.login, before.hash), 'UTF8')), 'hex'));
  RETURN NULL;
END $$;

CREATE TRIGGER entry_no_change BEFORE UPDATE OR DELETE ON bathwright.entry
  FOR EACH ROW EXECUTE FUNCTION bathwright.no_change();
CREATE TRIGGER entry_no_truncate BEFORE TRUNCATE ON bathwright.entry
  FOR EACH STATEMENT EXECUTE FUNCTION bathwright.no_change();
CREATE TRIGGER entry_in_turn BEFORE INSERT ON bathwright.entry
  FOR EACH STATEMENT EXECUTE FUNCTION bathwright.entry_in_turn();
CREATE TRIGGER entry_arrives BEFORE INSERT ON bathwright.entry
  FOR EACH ROW EXECUTE FUNCTION bathwright.entry_arrives();
CREATE TRIGGER entry_anchored AFTER INSERT ON bathwright.entry REFERENCING NEW TABLE AS arrived
  FOR EACH STATEMENT EXECUTE FUNCTION bathwright.entry_anchored();
CREATE TRIGGER anchor_no_change BEFORE UPDATE OR DELETE ON bathwright.anchor
  FOR EACH ROW EXECUTE FUNCTION bathwright.no_change();
CREATE TRIGGER anchor_no_truncate BEFORE TRUNCATE ON bathwright.anchor
  FOR EACH STATEMENT EXECUTE FUNCTION bathwright.no_change();

ALTER TABLE bathwright.entry ENABLE ROW LEVEL SECURITY;
CREATE POLICY entry_of_own_site ON bathwright.entry FOR SELECT
  USING ('*' IN (SELECT bathwright.sites()) OR site IN (SELECT bathwright.sites()));
CREATE POLICY entry_for_own_site ON bathwright.entry FOR INSERT
  WITH CHECK (site IN (SELECT bathwright.sites()));

REVOKE ALL ON ALL FUNCTIONS IN SCHEMA bathwright FROM PUBLIC;
GRANT USAGE ON SCHEMA bathwright TO bathwright_operator, bathwright_chemist, bathwright_auditor;
GRANT EXECUTE ON FUNCTION bathwright.sites() TO bathwright_operator, bathwright_chemist, bathwright_auditor;
GRANT SELECT ON bathwright.format, bathwright.entry, bathwright.anchor
  TO bathwright_operator, bathwright_chemist, bathwright_auditor;
-- arrival, received and login are the server's to say
GRANT INSERT (chain, seq, site, form, kind, tank, shift, at, happened, boot, uptime_ms, station, "by", role,
              witness, body, about, program, bath_type, previous, signature, witness_signature, hash)
  ON bathwright.entry TO bathwright_operator, bathwright_chemist;
)sql"};

inline constexpr std::int64_t format_version = std::int64_t{migrations.size()};

}  // namespace bathwright::plant
