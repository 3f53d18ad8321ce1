// plant_report FILE: measures load and faults on the disk of this machine, tries the attacks, writes the
// page.
#include <fmt/format.h>

#include <cstdio>
#include <fstream>
#include <thread>

#include "attacks.hpp"
#include "stations.hpp"
#include "support.hpp"

using namespace plant_test;

namespace {

constexpr unsigned seed = 20260302;

std::string load_table() {
  const Aftermath load =
      run({.stations = 20, .entries_a_second = 5, .time = std::chrono::seconds(20), .where = Where::disk});
  const auto row = [](const char* what, const Spread& spread) {
    return fmt::format("| {} | {:.1f} | {:.1f} | {:.1f} |\n", what, spread.median, spread.p99, spread.worst);
  };
  return "## Load: 20 stations, 5 entries a second each, for 20 s\n\n| ms | median | 99 of 100 below | worst |\n"
         "|---|---|---|---|\n" +
         row("acknowledged: on the station's own disk", load.acknowledgement) +
         row("from there to the server's disk (a station looks every 50 ms whether it has something to send)",
             load.arrival) +
         fmt::format("\n{} acknowledged, {} on the server, lost {}; chains and anchors {}.\n",
                     load.acknowledged, load.on_server, load.lost_here + load.lost_there,
                     load.verified ? "verify" : "do NOT verify");
}

std::string size_table() {
  constexpr int count = 20'000;
  Server server(Where::disk);
  const TempFolder folder;
  auto log = open_log(folder / "here.log");
  for (int i = 0; i < count; ++i)
    must(log.append(note("nickel-" + std::to_string(i % 20), std::string(300, 'x'))));
  plant::Station station(server.over_tls(server.login(logbook::Role::operator_, "plating")));
  std::string table =
      fmt::format("## One log of {} entries with bodies of 300 bytes\n\n| step | s |\n|---|---|\n", count);
  const auto timed = [&](const char* what, auto step) {
    const auto start = std::chrono::steady_clock::now();
    step();
    table += fmt::format("| {} | {:.2f} |\n", what,
                         std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count());
  };
  std::string chain;
  timed("sent for the first time", [&] { chain = must(station.send(log)).chain; });
  timed("sent again: nothing is new", [&] { must(station.send(log)); });
  timed("the last 50 entries of one tank listed", [&] {
    plant::Filter filter;
    filter.entry.tank = "nickel-7";
    filter.entry.newest_first = true;
    filter.entry.limit = 50;
    must(station.list(filter));
  });
  timed("fetched", [&] { must(station.fetch(chain)); });
  timed("verified, anchors and chain", [&] { must(station.verify(folder.path())); });
  return table;
}

std::string fault_table() {
  struct Row {
    Breakage breakage;
    const char* words;
  };
  std::string table =
      "## Faults: 8 stations, 20 entries a second each, for 20 s, then everything mended and sent\n\n"
      "Lost here: acknowledged, and not in the station's log. Lost there: said to be on the server, and not there when it "
      "was up again.\n\n"
      "| fault, at random moments | times | acknowledged | lost here | said to be there | lost there | in all logs | on the "
      "server | twice or different | verify | longest acknowledgement, ms | a station was told |\n"
      "|---|---|---|---|---|---|---|---|---|---|---|---|\n";
  for (const Row& row : {Row{Breakage::stations_killed, "a station killed (SIGKILL)"},
                         Row{Breakage::server_killed, "the server killed (SIGKILL) and started again"},
                         Row{Breakage::server_frozen, "the server frozen (SIGSTOP) for 1.5 s"},
                         Row{Breakage::connections_cut, "every connection ended (pg_terminate_backend)"},
                         Row{Breakage::all_together, "any of these"}}) {
    const Aftermath o = run({.breakage = row.breakage,
                             .stations = 8,
                             .time = std::chrono::seconds(20),
                             .where = Where::disk,
                             .seed = seed});
    table += fmt::format("| {} | {} | {} | {} | {} | {} | {} | {} | {} | {} | {:.0f} | {} |\n", row.words,
                         o.faults, o.acknowledged, o.lost_here, o.said_to_be_there, o.lost_there, o.in_logs,
                         o.on_server, o.same ? "none" : "SOME", o.verified ? "ok" : "NOT ok",
                         o.acknowledgement.worst, o.words.empty() ? "nothing" : o.words);
  }
  return table;
}

std::string attack_tables() {
  std::string text =
      "## Attempts with a login\n\n| login | attempt | refused | answer |\n|---|---|---|---|\n";
  {
    Server server;
    for (const Attempt& attempt : attempts(server))
      text += fmt::format("| {} | {} | {} | {} |\n", attempt.who, attempt.what,
                          attempt.refused ? "yes" : "NO", attempt.answer);
  }
  text +=
      "\n## Tampering by whoever has the whole server, with the guards out of the way\n\n"
      "| changed | found by verify | found with an anchor noted elsewhere | first words |\n|---|---|---|---|\n";
  Server server;
  for (const Tampering& row : tamperings(server))
    text += fmt::format("| {} | {} | {} | {} |\n", row.what, row.found ? "yes" : "no",
                        row.found_noted ? "yes" : "no", row.words);
  return text;
}

}  // namespace

int main(int argc, char** argv) {
  if (argc != 2) {
    std::fputs("plant_figures FILE: where the page goes\n", stderr);
    return 2;
  }
  std::string page = fmt::format(
      "# The plant's shared log: measured\n\nRenewed by `ninja plant_report`. PostgreSQL 15 and all stations on one "
      "machine with {} processors, over TLS on the loop-back, logs and server on its disk; other work on the machine "
      "makes the times longer. Random moments from seed {}.\n",
      std::thread::hardware_concurrency(), seed);
  for (const auto table : {load_table, size_table, fault_table, attack_tables}) page += '\n' + table();
  std::ofstream file(argv[1]);
  file << page;
  return file.flush() ? 0 : 3;
}
