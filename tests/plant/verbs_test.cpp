// bathwright plant, as a script sees it.
#include <catch2/catch.hpp>

#include "../app/program.hpp"
#include "server.hpp"

using namespace plant_test;
using app_test::Bench;

namespace {

void write_private(const Bench& bench, const std::string& file, const std::string& content) {
  bench.write(file, content);
  std::filesystem::permissions(bench.folder() / "work" / file,
                               std::filesystem::perms::owner_read | std::filesystem::perms::owner_write);
}

}  // namespace

TEST_CASE("a plant from set-up to verify, at the command line", "[unit][plant]") {
  unsetenv("BATHWRIGHT_PLANT");
  Server server;
  const Bench bench;
  write_private(bench, "owner.conn", server.text("plant_owner"));
  write_private(bench, "line-a.conn", server.text("line_a") + "\n");
  write_private(bench, "auditor.conn", server.text("auditor"));
  server.sql("CREATE ROLE line_a LOGIN; CREATE ROLE auditor LOGIN");
  const auto ok = [&](const std::string& arguments) {
    const app_test::Run run = bench.run(arguments);
    INFO(arguments << "\n" << run.out << run.err);
    CHECK(run.status == 0);
    if (arguments.find("--json") == std::string::npos) CHECK(app_test::widest_line(run.out) <= 80);
    return run;
  };
  ok("plant set-up --connection owner.conn");
  ok("plant grant line_a operator plating --connection owner.conn");
  ok("plant grant auditor auditor '*' --connection owner.conn");
  ok("log add addition --tank N-07 --note '12 kg boric acid' --by Okafor --log shift.sqlite");
  ok("log add note --tank N-07 --note 'anode bag torn' --by Okafor --log shift.sqlite");

  CHECK(ok("plant send --log shift.sqlite --connection line-a.conn").out.starts_with("2 sent, 0 were there"));
  const auto again = ok("plant send --log shift.sqlite --connection line-a.conn --json").json();
  CHECK(again["sent"]["sent"] == 0);
  CHECK(again["sent"]["already_there"] == 2);
  const std::string chain = again["sent"]["log"],
                    noted = "1:" + again["sent"]["anchor"]["hash"].get<std::string>();

  CHECK(ok("plant list --connection auditor.conn").out.find("addition") != std::string::npos);
  const auto list = ok("plant list --kind note --connection auditor.conn --json").json();
  REQUIRE(list["entries"].size() == 1);
  CHECK(list["entries"][0]["body"]["note"] == "anode bag torn");
  CHECK(list["entries"][0]["login"] == "line_a");
  CHECK(ok("plant slips --connection auditor.conn").out == "No entry fits.\n");
  CHECK(ok("plant logs --connection auditor.conn --json").json()["logs"][0]["entries"] == 2);
  ok("plant fetch " + chain.substr(0, 8) + " back.sqlite --connection auditor.conn");
  const auto original = ok("log list --log shift.sqlite --json").json();
  CHECK(ok("log list --log back.sqlite --json").json()["entries"] == original["entries"]);
  CHECK(ok("plant verify --noted " + noted + " --connection auditor.conn --json").json()["verified"]["ok"] ==
        true);

  // An older copy is a finding.
  {
    ok("plant fetch " + chain + " older.sqlite --connection auditor.conn");
    ok("log add note --tank N-07 --note more --by Okafor --log shift.sqlite");
    ok("plant send --log shift.sqlite --connection line-a.conn");
    const auto run = bench.run("plant send --log older.sqlite --connection line-a.conn");
    CHECK(run.status == 1);
    CHECK(run.out.find("1 entries more of this log") != std::string::npos);
  }
  // What is mistyped is said.
  {
    CHECK(bench.run("plant send --log shift.sqlite").err.find("BATHWRIGHT_PLANT: is not set") !=
          std::string::npos);
    bench.write("open.conn", "host=localhost");
    CHECK(bench.run("plant logs --connection open.conn").status == 2);
    CHECK(bench.run("plant fetch ffff back.sqlite --connection auditor.conn").err.find("names no log") !=
          std::string::npos);
    CHECK(bench.run("plant verify --noted 7 --connection auditor.conn").err.find("is no anchor") !=
          std::string::npos);
    CHECK(bench.run("plant grant line_a oprator plating --connection owner.conn").err.find("operator") !=
          std::string::npos);
  }
  // A tampered table is a finding.
  {
    server.sql(
        "SET session_replication_role = replica; UPDATE bathwright.entry SET body = '{}' WHERE seq = 1");
    const auto run = bench.run("plant verify --connection auditor.conn");
    CHECK(run.status == 1);
    CHECK(run.out.find("something is not as it came") != std::string::npos);
  }
  // Without a server nothing of the log suffers.
  {
    server.kill();
    const auto run = bench.run("plant send --log shift.sqlite --connection line-a.conn");
    CHECK(run.status == 3);
    CHECK(run.err.find("cannot be reached") != std::string::npos);
    ok("log verify --log shift.sqlite");
  }
}
