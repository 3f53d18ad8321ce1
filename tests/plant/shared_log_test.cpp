// One table for all stations: what goes up comes back the same, once, and only where it may.
#include <catch2/catch.hpp>
#include <chrono>

#include "attacks.hpp"
#include "bathwright/plant/administration.hpp"

#include "server.hpp"
#include "support.hpp"

using namespace plant_test;
using logbook::EntryKind;
using logbook::Role;

namespace {

const logbook::Credential chemist{"A. Chemist", "271828"}, hand{"O. Hand", "314159"};

logbook::NewEntry of_kind(EntryKind kind, const std::string& body = R"({"text":"as agreed"})") {
  logbook::NewEntry entry = note();
  entry.kind = kind;
  entry.by.clear();
  entry.body = body;
  return entry;
}

/// A log with people, a rule, signed entries, a slip, an answer, a back-dated entry and letters of the world.
logbook::Logbook full_log(const std::filesystem::path& path) {
  auto log = open_log(path);
  must(log.admit(chemist.name, Role::chemist, chemist.pin));
  must(log.admit(hand.name, Role::operator_, hand.pin, {chemist, {}}));
  must(log.ask_second_signature({"nickel-1", {EntryKind::addition}}, {chemist, {}}));
  must(log.append(of_kind(EntryKind::slip), {chemist, {}}));
  logbook::NewEntry addition =
      of_kind(EntryKind::addition, R"({"text":"Säure, 二, \"quoted\" \u0000 \\ end"})");
  addition.about = 4;
  addition.happened = logbook::UtcTime(std::chrono::hours(480'000));
  addition.bath_type = "watts-nickel 1.0.0 sha256:00ff";
  must(log.append(addition, {hand, chemist}));
  must(log.append(of_kind(EntryKind::note), {hand, {}}));
  return log;
}

std::string why_not(const Result<plant::Sent>& sent) {
  REQUIRE_FALSE(sent);
  return sent.problems()[0].text();
}

}  // namespace

TEST_CASE("a log goes up and comes back the same to the last hash", "[unit][plant]") {
  static Server server;  // for all sections: each sends logs of its own
  const TempFolder folder;
  const auto log = full_log(folder / "here.log");
  plant::Station station(server.over_tls(server.login(Role::chemist, "plating")));
  const plant::Sent sent = must(station.send(log));
  CHECK(sent.sent == 6);
  CHECK(sent.already_there == 0);
  CHECK(sent.anchor.number > 0);

  const auto entries = must(station.fetch(sent.chain));
  CHECK(entries == must(log.list()));
  auto back = open_log(folder / "back.log");
  CHECK(must(back.take_over(entries)) == 6);
  CHECK(must(back.list()) == must(log.list()));
  CHECK(back.verify().ok);

  SECTION("sent again, nothing is there twice") {
    const plant::Sent again = must(station.send(log));
    CHECK(again.sent == 0);
    CHECK(again.already_there == 6);
    CHECK(again.anchor == sent.anchor);
  }
  SECTION("the copy that came back goes on as the log") {
    must(back.append(of_kind(EntryKind::note), {hand, {}}));
    CHECK(must(station.send(back)).sent == 1);
    // The older file is behind now, and is told so.
    const plant::Sent behind = must(station.send(log));
    CHECK(behind.sent == 0);
    CHECK(behind.missing_here == 1);
  }
  SECTION("two copies that went on apart are not mixed") {
    auto ours = open_log(folder / "here.log");
    must(ours.append(of_kind(EntryKind::note), {hand, {}}));
    must(back.append(of_kind(EntryKind::level), {hand, {}}));
    must(back.append(of_kind(EntryKind::note), {hand, {}}));
    must(station.send(ours));
    const auto refused = station.send(back);
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].kind == Fault::inconsistent_data);
    CHECK(why_not(refused).find("two copies of it went on apart") != std::string::npos);
    CHECK(must(station.fetch(sent.chain)).size() == 7);
    CHECK(must(station.verify(folder.path())).ok);
  }
}

TEST_CASE("a log longer than one page and bodies of the largest size arrive whole", "[unit][plant]") {
  Server server;
  const TempFolder folder;
  auto log = open_log(folder / "here.log");
  constexpr int count = 300;
  constexpr std::size_t large = (1 << 20) - 20;
  for (int i = 0; i < count; ++i)
    must(log.append(note("nickel-1", std::string(i % 100 == 7 ? large : 10, 'x'))));
  plant::Station station(server.over_tls(server.login(Role::operator_, "plating")));
  const plant::Sent sent = must(station.send(log));
  CHECK(sent.sent == count);
  CHECK(must(station.fetch(sent.chain)) == must(log.list()));
  CHECK(must(station.verify(folder.path())).ok);
}

TEST_CASE("the lists run over all stations of the sites a login sees", "[unit][plant]") {
  Server server;
  const TempFolder folder;
  auto a = open_log(folder / "a.log", "line-a"), b = open_log(folder / "b.log", "line-b"),
       c = open_log(folder / "c.log", "anodising-1");
  plant::Station plating(server.as(server.login(Role::operator_, "plating"))),
      anodising(server.as(server.login(Role::operator_, "anodising"))),
      auditor(server.as(server.login(Role::auditor, "*")));
  logbook::NewEntry slip = note("nickel-1", "100 % more");
  slip.kind = EntryKind::slip;
  must(a.append(slip));
  must(plating.send(a));
  slip.tank = "nickel-2";
  must(b.append(slip));
  must(b.append(note("nickel-2", "Pump LOUD")));
  must(plating.send(b));
  must(c.append(note("acid-1")));
  must(anodising.send(c));
  logbook::NewEntry closed = note("nickel-1");
  closed.kind = EntryKind::slip_closed;
  closed.about = 1;
  closed.body = R"({"outcome":"done"})";
  must(a.append(closed));
  must(plating.send(a));

  const auto stations = [](const std::vector<plant::Arrived>& list) {
    std::string all;
    for (const auto& one : list) all += one.entry.station + "/" + std::to_string(one.entry.seq) + " ";
    return all;
  };
  CHECK(stations(must(plating.list())) == "line-a/1 line-b/1 line-b/2 line-a/2 ");
  CHECK(stations(must(anodising.list())) == "anodising-1/1 ");
  CHECK(stations(must(auditor.list())) == "line-a/1 line-b/1 line-b/2 anodising-1/1 line-a/2 ");
  CHECK(stations(must(plating.open_slips())) == "line-b/1 ");
  CHECK(stations(must(plating.open_slips("nickel-1"))).empty());
  CHECK(must(auditor.chains()).size() == 3);
  CHECK(must(auditor.chains())[0].entries == 2);

  plant::Filter filter;
  filter.station = "line-b";
  CHECK(stations(must(auditor.list(filter))) == "line-b/1 line-b/2 ");
  filter = {.site = "anodising"};
  CHECK(stations(must(auditor.list(filter))) == "anodising-1/1 ");
  filter = {};
  filter.entry.text = "pump loud";
  CHECK(stations(must(auditor.list(filter))) == "line-b/2 ");
  filter.entry.text = "0 % m";  // to the letter, not a pattern
  CHECK(stations(must(auditor.list(filter))) == "line-a/1 line-b/1 ");
  filter.entry.tank = "nickel-2";
  CHECK(stations(must(auditor.list(filter))) == "line-b/1 ");
  filter = {};
  filter.entry.kind = EntryKind::slip_closed;
  filter.entry.about = 1;
  CHECK(stations(must(auditor.list(filter))) == "line-a/2 ");
  filter = {};
  filter.entry.newest_first = true;
  filter.entry.limit = 2;
  CHECK(stations(must(auditor.list(filter))) == "line-a/2 anodising-1/1 ");
  filter.entry.after_seq = 4;
  CHECK(stations(must(auditor.list(filter))) == "line-b/2 line-b/1 ");
  filter = {};
  filter.entry.from = logbook::UtcTime{};
  filter.entry.to = logbook::UtcTime{};
  CHECK(must(auditor.list(filter)).empty());
}

TEST_CASE("a login sends what its role and site may", "[failure][plant]") {
  static Server server;  // for all sections: each sends logs of its own
  const TempFolder folder;
  const auto log = full_log(folder / "here.log");

  SECTION("an operator's login stops before a chemist's rule, and a chemist's goes on from there") {
    plant::Station station(server.as(server.login(Role::operator_, "plating")));
    const auto refused = station.send(log);
    CHECK(why_not(refused).find("entry 3 is of kind setting, which login operator.plating may not write") !=
          std::string::npos);
    plant::Station allowed(server.as(server.login(Role::chemist, "plating")));
    const plant::Sent sent = must(allowed.send(log));
    CHECK(sent.already_there == 2);
    CHECK(sent.sent == 4);
  }
  SECTION("what the server refuses an operator, the log refuses too") {
    auto ours = open_log(folder / "here.log");
    const std::string login = server.login(Role::operator_, "plating");
    int refused = 0;
    for (const std::string& name : logbook::entry_kind_names()) {
      const EntryKind kind = must(logbook::entry_kind(name));
      const Answer answer =
          raw(server, login,
              "INSERT INTO bathwright.entry (chain, seq, kind) VALUES (repeat('e', 64), 1, '" + name + "')");
      // A row that lacks the rest never arrives; whether its kind was the trouble tells the SQLSTATE.
      if (answer.sqlstate != "BW003") continue;
      INFO(name);
      ++refused;
      CHECK_FALSE(ours.append(of_kind(kind, R"({"second_signature":{"tank":"t","kinds":[]}})"), {hand, {}}));
    }
    CHECK(refused > 0);
  }
  SECTION("an auditor's login sends nothing") {
    plant::Station station(server.as(server.login(Role::auditor, "plating")));
    CHECK(why_not(station.send(log)).find("permission denied") != std::string::npos);
  }
  SECTION("a login of two sites says which") {
    const std::string login = server.login(Role::chemist, "east");
    must(plant::grant(server.as("plant_owner"), login, Role::chemist, "west"));
    plant::Station unsaid(server.as(login));
    CHECK(why_not(unsaid.send(log)).find("is bound to no site or to several") != std::string::npos);
    plant::Station said(server.as(login), "west");
    CHECK(must(said.send(log)).sent == 6);
    plant::Station elsewhere(server.as(login), "east");
    CHECK(must(elsewhere.send(log)).sent == 0);  // nothing new: nothing to be of another site
    plant::Station foreign(server.as(login), "galvanising");
    auto more = open_log(folder / "here.log");
    must(more.append(of_kind(EntryKind::note), {hand, {}}));
    CHECK(why_not(foreign.send(more)).find("may not write for site galvanising") != std::string::npos);
    CHECK(why_not(elsewhere.send(more)).find("this log is of site west") != std::string::npos);
  }
  SECTION("only an auditor is bound to every site") {
    CHECK_FALSE(plant::grant(server.as("plant_owner"), "plant_owner", Role::chemist, "*"));
  }
}

TEST_CASE("setting up again changes nothing, and what is not set up is said", "[unit][plant]") {
  Server server;
  const TempFolder folder;
  auto log = open_log(folder / "here.log");
  must(log.append(note()));
  plant::Station station(server.as(server.login(Role::chemist, "plating")));
  must(station.send(log));
  must(plant::set_up(server.as("plant_owner")));
  CHECK(must(station.send(log)).already_there == 1);

  server.sql("CREATE DATABASE bare", "postgres");
  plant::Station bare(server.as("postgres", "bare"));
  CHECK(why_not(bare.send(log)).find("has no tables of Bathwright") != std::string::npos);
  server.sql("INSERT INTO bathwright.format (version) VALUES (99)");
  plant::Station newer(server.as(server.login(Role::chemist, "plating")));
  CHECK(why_not(newer.send(log)).find("has tables of version 99") != std::string::npos);
  CHECK_FALSE(plant::set_up(server.as("plant_owner")));
}

TEST_CASE("TLS: only the server whose certificate and name are right is talked to", "[failure][plant]") {
  Server server;
  const TempFolder folder;
  auto log = open_log(folder / "here.log");
  must(log.append(note()));
  const std::string login = server.login(Role::operator_, "plating");
  const auto sent = [&](const std::string& text) {
    plant::Station station(must(plant::Connection::of(text)));
    return station.send(log);
  };
  CHECK(must(sent(server.tls_text(login, "localhost"))).sent == 1);
  CHECK(why_not(sent(server.tls_text(login, "pg.plant.example"))).find("does not match host name") !=
        std::string::npos);
  std::string unknown = server.tls_text(login, "localhost");
  unknown.replace(unknown.find("ca.crt"), 6, "no.crt");
  CHECK(why_not(sent(unknown)).find("does not exist") != std::string::npos);
  // Without TLS the server has no rule that lets anybody in.
  CHECK(why_not(sent(server.tls_text(login, "localhost") + " sslmode=disable")).find("no encryption") !=
        std::string::npos);
  std::string wrong = server.tls_text(login, "localhost");
  wrong.replace(wrong.find(password), std::string(password).size(), "guessed-77");
  const std::string words = why_not(sent(wrong));
  CHECK(words.find("authentication failed") != std::string::npos);
  CHECK(words.find("guessed-77") == std::string::npos);
}

TEST_CASE("whoever has a login can do only what it is for", "[failure][plant]") {
  Server server;
  for (const Attempt& attempt : attempts(server)) {
    INFO(attempt.who << " " << attempt.what << ": " << attempt.answer);
    CHECK(attempt.refused);
  }
  const TempFolder folder;
  plant::Station auditor(server.as(server.login(Role::auditor, "*")));
  const auto verified = must(auditor.verify(folder.path()));
  // One of the attempts carried a log on with made-up content, as its site's login can: that is what verify
  // finds.
  CHECK(verified.problems.empty());
  CHECK_FALSE(verified.ok);
}

TEST_CASE("whoever has the whole server is found out", "[failure][plant]") {
  Server server;
  for (const Tampering& row : tamperings(server)) {
    INFO(row.what << ": " << row.words);
    const bool untouched = row.what.starts_with("nothing"),
               only_noted = row.what == "the last log deleted with its anchor";
    CHECK(row.found == (!untouched && !only_noted));
    CHECK(row.found_noted == !untouched);
  }
}
