#include "attacks.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "bathwright/plant/station.hpp"
#include "support.hpp"

namespace plant_test {
namespace {

using logbook::Role;

/// A statement that puts one row into the table, with what matters to its guards.
struct Row {
  std::string chain;
  std::int64_t seq = 1;
  std::string site = "plating", kind = "note", previous = std::string(64, '0'), hash = std::string(64, 'e');

  [[nodiscard]] std::string values() const {
    return fmt::format(
        "('{}', {}, '{}', 2, '{}', 't', '', '', '', '', 0, 's', 'b', '', '', '{{}}', NULL, '', '', '{}', '', '', '{}')",
        chain, seq, site, kind, previous, hash);
  }
  [[nodiscard]] std::string insert() const {
    return "INSERT INTO bathwright.entry (chain, seq, site, form, kind, tank, shift, at, happened, boot, "
           "uptime_ms, station, \"by\", role, witness, body, about, program, bath_type, previous, signature, "
           "witness_signature, hash) VALUES " +
           values();
  }
};

/// The chain of a new log with `count` notes, sent.
plant::Sent send_log(const Server& server, const TempFolder& folder, const std::string& login,
                     const std::string& name, int count) {
  auto log = open_log(folder / name, name);
  for (int i = 0; i < count; ++i) must(log.append(note()));
  plant::Station station(server.as(login));
  return must(station.send(log));
}

}  // namespace

std::vector<Attempt> attempts(Server& server) {
  const TempFolder folder;
  const std::string hand = server.login(Role::operator_, "plating"),
                    chemist = server.login(Role::chemist, "plating"),
                    reader = server.login(Role::auditor, "plating"),
                    elsewhere = server.login(Role::chemist, "anodising");
  server.sql("CREATE ROLE stranger LOGIN");
  const std::string ours = send_log(server, folder, hand, "line-a", 3).chain;
  const std::string theirs = send_log(server, folder, elsewhere, "line-b", 2).chain;
  const std::string last = raw(server, hand, "SELECT hash FROM bathwright.entry WHERE seq = 3").value;
  const std::string e(64, 'e'), f(64, 'f');

  struct Try {
    std::string who, what, sql;
  };
  const Row next{ours, 4, "plating", "note", last, e};
  const auto with = [&](auto change) {
    Row row = next;
    change(row);
    return row.insert();
  };
  const std::vector<Try> tries{
      {hand, "changes an entry", "UPDATE bathwright.entry SET body = '{}' WHERE seq = 1"},
      {hand, "deletes an entry", "DELETE FROM bathwright.entry WHERE seq = 1"},
      {hand, "empties the table", "TRUNCATE bathwright.entry"},
      {hand, "drops a guard", "DROP TRIGGER entry_no_change ON bathwright.entry"},
      {hand, "switches the guards off", "ALTER TABLE bathwright.entry DISABLE TRIGGER ALL"},
      {hand, "steps around the guards", "SET session_replication_role = replica"},
      {hand, "switches row security off", "ALTER TABLE bathwright.entry DISABLE ROW LEVEL SECURITY"},
      {hand, "drops the table", "DROP TABLE bathwright.entry"},
      {hand, "replaces a guard's function",
       "CREATE OR REPLACE FUNCTION bathwright.no_change() RETURNS trigger LANGUAGE plpgsql AS 'BEGIN RETURN NEW; END'"},
      {hand, "adds a trigger of its own",
       "CREATE TRIGGER t BEFORE INSERT ON bathwright.entry FOR EACH ROW EXECUTE FUNCTION bathwright.no_change()"},
      {hand, "inserts for another site", with([](Row& row) { row.site = "anodising"; })},
      {hand, "starts a log for every site", Row{e, 1, "*", "note", std::string(64, '0'), e}.insert()},
      {hand, "inserts with a gap", with([](Row& row) { row.seq = 5; })},
      {hand, "inserts what does not follow", with([&](Row& row) { row.previous = f; })},
      {hand, "inserts a number again with another content", with([](Row& row) { row.seq = 3; })},
      {hand, "inserts in place of an entry",
       with([](Row& row) { row.seq = 3; }) + " ON CONFLICT (chain, seq) DO UPDATE SET body = '{}'"},
      {hand, "begins a log in the middle", Row{e, 2, "plating", "note", f, e}.insert()},
      {hand, "begins a log under another name",
       Row{f, 1, "plating", "note", std::string(64, '0'), e}.insert()},
      {hand, "inserts two logs in one statement",
       Row{e, 1}.insert() + ", " + Row{f, 1, "plating", "note", std::string(64, '0'), f}.values()},
      {hand, "inserts a rule (setting)", with([](Row& row) { row.kind = "setting"; })},
      {hand, "inserts a dump", with([](Row& row) { row.kind = "dump"; })},
      {hand, "states the number of arrival",
       "INSERT INTO bathwright.entry (chain, seq, arrival) VALUES ('x', 1, 1)"},
      {hand, "states who sent it", "INSERT INTO bathwright.entry (chain, seq, login) VALUES ('x', 1, 'y')"},
      {hand, "makes an anchor",
       "INSERT INTO bathwright.anchor SELECT number + 9, site, chain, first_seq, last_seq, last_hash, arrival + 9, "
       "received, login, previous, md5(hash) FROM bathwright.anchor LIMIT 1"},
      {hand, "changes an anchor", "UPDATE bathwright.anchor SET login = 'y'"},
      {hand, "deletes an anchor", "DELETE FROM bathwright.anchor"},
      {hand, "binds itself to another site",
       "INSERT INTO bathwright.site_of_login VALUES (session_user, 'anodising')"},
      {hand, "makes itself a chemist", "GRANT bathwright_chemist TO \"operator.plating\""},
      {hand, "takes the chemist's role", "SET ROLE bathwright_chemist"},
      {hand, "takes another login", "SET SESSION AUTHORIZATION \"chemist.plating\""},
      {hand, "says the tables are newer", "INSERT INTO bathwright.format (version) VALUES (99)"},
      {hand, "holds up all others with a lock",
       "BEGIN; LOCK TABLE bathwright.entry IN ACCESS EXCLUSIVE MODE"},
      {hand, "holds up all others by locking the anchors",
       "BEGIN; LOCK TABLE bathwright.anchor IN EXCLUSIVE MODE"},
      {hand, "holds up all others with the turn", "SELECT * FROM bathwright.format FOR UPDATE"},
      {chemist, "changes an entry", "UPDATE bathwright.entry SET body = '{}' WHERE seq = 1"},
      {chemist, "deletes an entry", "DELETE FROM bathwright.entry WHERE seq = 1"},
      {chemist, "inserts for another site", with([](Row& row) { row.site = "anodising"; })},
      {chemist, "carries another site's log on",
       fmt::format(
           "INSERT INTO bathwright.entry (chain, seq, site, form, kind, tank, shift, at, happened, boot, uptime_ms, "
           "station, \"by\", role, witness, body, program, bath_type, previous, signature, witness_signature, "
           "hash) VALUES ('{}', 3, 'plating', 2, 'note', 't', '', '', '', '', 0, 's', 'b', '', '', '{{}}', '', '', "
           "'{}', '', '', '{}')",
           theirs, raw(server, elsewhere, "SELECT hash FROM bathwright.entry WHERE seq = 2").value, e)},
      {reader, "inserts an entry", next.insert()},
      {reader, "changes an entry", "UPDATE bathwright.entry SET body = '{}' WHERE seq = 1"},
      {"stranger", "reads", "SELECT count(*) FROM bathwright.entry"},
      {"stranger", "inserts an entry", next.insert()},
      {"plant_owner", "changes an entry", "UPDATE bathwright.entry SET body = '{}' WHERE seq = 1"},
      {"plant_owner", "deletes an entry", "DELETE FROM bathwright.entry WHERE seq = 1"},
      {"plant_owner", "empties the table", "TRUNCATE bathwright.entry"},
      {"plant_owner", "deletes an anchor", "DELETE FROM bathwright.anchor"},
  };
  std::vector<Attempt> result;
  for (const Try& attempt : tries) {
    const Answer answer = raw(server, attempt.who, attempt.sql);
    result.push_back({attempt.who, attempt.what, answer.sqlstate.empty() ? "done" : answer.message,
                      !answer.sqlstate.empty()});
  }
  // What is not refused but must bring nothing.
  const std::string seen =
      raw(server, hand, "SELECT count(*) FROM bathwright.entry WHERE site = 'anodising'").value;
  result.push_back({hand, "reads another site's entries", seen + " rows", seen == "0"});
  const Answer shadowed = raw(
      server, hand,
      "CREATE FUNCTION pg_temp.sha256(bytea) RETURNS bytea LANGUAGE sql AS 'SELECT ''x''::bytea'; SET search_path = "
      "pg_temp, pg_catalog; " +
          next.insert() + "; SELECT count(*) FROM bathwright.anchor WHERE hash = encode('x'::bytea, 'hex')");
  result.push_back({hand, "puts a function of its own in the anchor's place",
                    shadowed.value + " anchors of it", shadowed.sqlstate.empty() && shadowed.value == "0"});
  return result;
}

std::vector<Tampering> tamperings(Server& server) {
  const TempFolder folder;
  const std::string hand = server.login(Role::operator_, "plating"),
                    other = server.login(Role::operator_, "anodising"),
                    reader = server.login(Role::auditor, "*");
  send_log(server, folder, hand, "line-a", 4);
  send_log(server, folder, other, "line-b", 4);
  const plant::Anchor noted = send_log(server, folder, hand, "line-c", 4).anchor;

  struct Step {
    std::string what, sql;
    bool of_guards = false;
  };
  const std::string of_c = "chain = (SELECT chain FROM bathwright.anchor WHERE number = 3)";
  const std::vector<Step> steps{
      {"nothing", ""},
      {"one letter of a body",
       "UPDATE bathwright.entry SET body = replace(body, 'torn', 'born') WHERE arrival = 6"},
      {"the writer", "UPDATE bathwright.entry SET \"by\" = 'Nobody' WHERE arrival = 2"},
      {"a hash", "UPDATE bathwright.entry SET hash = repeat('a', 64) WHERE arrival = 4"},
      {"the last entry of a log deleted", "DELETE FROM bathwright.entry WHERE arrival = 8"},
      {"an entry in the middle deleted", "DELETE FROM bathwright.entry WHERE arrival = 6"},
      {"a whole log deleted", "DELETE FROM bathwright.entry WHERE " + of_c},
      {"the site of a log", "UPDATE bathwright.entry SET site = 'anodising' WHERE " + of_c},
      {"who sent an entry", "UPDATE bathwright.entry SET login = 'x' WHERE arrival = 9"},
      {"when an entry came",
       "UPDATE bathwright.entry SET received = '2020' || substr(received, 5) WHERE arrival = 1"},
      {"two arrivals exchanged",
       "UPDATE bathwright.entry SET arrival = 100 WHERE arrival = 4; UPDATE bathwright.entry SET arrival = 4 WHERE "
       "arrival = 5; UPDATE bathwright.entry SET arrival = 5 WHERE arrival = 100"},
      {"an anchor's login", "UPDATE bathwright.anchor SET login = 'x' WHERE number = 2"},
      {"an anchor deleted", "DELETE FROM bathwright.anchor WHERE number = 2"},
      {"the last log deleted with its anchor",
       "DELETE FROM bathwright.entry WHERE " + of_c + "; DELETE FROM bathwright.anchor WHERE number = 3"},
      {"nothing, now that all is put back", ""},
      {"a guard dropped", "DROP TRIGGER entry_no_change ON bathwright.entry", true},
      {"a guard switched off", "ALTER TABLE bathwright.entry DISABLE TRIGGER entry_arrives", true},
      {"a guard's function emptied",
       "CREATE OR REPLACE FUNCTION bathwright.no_change() RETURNS trigger LANGUAGE plpgsql AS 'BEGIN RETURN NEW; END'",
       true},
      {"row security switched off", "ALTER TABLE bathwright.entry DISABLE ROW LEVEL SECURITY", true},
  };
  std::vector<Tampering> result;
  server.sql(
      "CREATE TABLE saved_entry AS TABLE bathwright.entry; CREATE TABLE saved_anchor AS TABLE bathwright.anchor");
  for (const Step& step : steps) {
    // Rows are put back; what is done to the guards is done to a copy.
    const std::string database = step.of_guards ? "tampered" : "shop";
    if (step.of_guards) server.sql("CREATE DATABASE tampered TEMPLATE shop", "postgres");
    if (!step.sql.empty()) server.sql("SET session_replication_role = replica; " + step.sql, database);
    std::vector<std::string> words;
    {
      plant::Station auditor(server.as(reader, database));
      const auto verified = must(auditor.verify(folder.path(), {noted}));
      words = verified.problems;
      for (const auto& chain : verified.chains)
        for (const auto& problem : chain.log.problems) words.push_back(problem.words);
    }
    const auto by_note = std::ranges::count_if(words, [](const std::string& word) {
      return word.find("noted elsewhere, is not on the server") != std::string::npos;
    });
    result.push_back({step.what, words.size() > static_cast<std::size_t>(by_note), !words.empty(),
                      words.empty() ? "" : words.front()});
    if (step.of_guards)
      server.sql("DROP DATABASE tampered WITH (FORCE)", "postgres");
    else if (!step.sql.empty())
      server.sql(
          "SET session_replication_role = replica; TRUNCATE bathwright.entry, bathwright.anchor; "
          "INSERT INTO bathwright.entry TABLE saved_entry; INSERT INTO bathwright.anchor TABLE saved_anchor");
  }
  return result;
}

}  // namespace plant_test
