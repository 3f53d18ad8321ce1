// The shift log from the command line: written, listed, corrected, verified.
#include <catch2/catch.hpp>
#include <filesystem>

#include "program.hpp"

using app_test::Bench;
using nlohmann::json;

TEST_CASE("what is logged is listed, corrected and verified", "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  REQUIRE(
      bench.run("log add addition --tank N-1 --note '12 kg boric acid' --by 'M. Okafor' --shift night" + log)
          .status == 0);
  REQUIRE(bench.run("log add note --tank N-2 --body '{\"filter\":\"changed\"}'" + log).status == 0);
  REQUIRE(bench.run("log correct 1 --reason 'weighed again' --note '11.5 kg'" + log).status == 0);

  const json list = bench.run("log list --json" + log).json();
  REQUIRE(list.at("entries").size() == 3);
  const json& first = list.at("entries").at(0);
  for (const char* key : {"seq", "kind", "tank", "shift", "at", "by", "body", "hash", "previous"})
    CHECK(first.contains(key));
  CHECK(first.at("by") == "M. Okafor");
  CHECK(first.at("body").at("note") == "12 kg boric acid");
  CHECK(list.at("entries").at(1).at("by") == "tester");
  CHECK(list.at("entries").at(2).at("corrects") == 1);
  CHECK(list.at("entries").at(2).at("previous") == list.at("entries").at(1).at("hash"));
  CHECK(bench.run("log list --tank N-2 --json" + log).json().at("entries").size() == 1);

  const json verified = bench.run("log verify --json" + log).json();
  CHECK(verified.at("ok") == true);
  CHECK(verified.at("entries") == 3);
  CHECK(verified.at("problems").empty());
}

TEST_CASE("without --log the log is made in the data folder, on the first entry and not before",
          "[unit][command]") {
  const Bench bench;
  const auto log = bench.folder() / "work/data/bathwright/shift-log.sqlite";
  CHECK(bench.run("log list").status == 2);
  CHECK_FALSE(std::filesystem::exists(log));
  const auto added = bench.run("log add note --tank N-1 --note hello");
  CHECK(added.status == 0);
  CHECK_THAT(added.out, Catch::Contains("New log") && Catch::Contains("entry 1"));
  CHECK(std::filesystem::exists(log));
}

TEST_CASE("analyse and dose log what they found, and tank starts from it", "[unit][command]") {
  const Bench bench;
  const std::string files =
      app_test::tank + " " + app_test::readings + " --log shift.sqlite --by Ana --shift early";
  const auto analysed = bench.run("analyse " + files + " --json");
  INFO(analysed.err);
  CHECK(analysed.json().at("logged_as") == 1);
  CHECK(bench.run("dose " + files + " --json").json().at("logged_as") == json({1, 2}));
  const json entries = bench.run("log list --log shift.sqlite --json").json().at("entries");
  REQUIRE(entries.size() == 2);
  CHECK(entries.at(0).at("kind") == "analysis");
  CHECK(entries.at(1).at("kind") == "plan");
  CHECK(entries.at(1).at("shift") == "early");
  const auto tank = bench.run("tank " + app_test::tank + " --log shift.sqlite --json").json();
  CHECK_THAT(tank.at("state_from").get<std::string>(), Catch::Contains("log entry 1"));
  CHECK(tank.at("read").at("pH") == analysed.json().at("pH"));
  CHECK(tank.at("read").at("temperature_C") == 54.0);
}

TEST_CASE("what was added after an analysis stops a second dose from it", "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", files = app_test::tank + " " + app_test::readings + log;
  const std::string add = "log add addition --note '14 kg boric acid' --tank ";
  CHECK_THAT(bench.run("dose " + files).out, !Catch::Contains("not in these readings"));
  CHECK_THAT(bench.run(add + "N-07" + log).out,
             Catch::Contains("first entry of a tank \"N-07\"") && Catch::Contains("N-07 Watts nickel"));
  CHECK_THAT(bench.run("dose " + files).out, !Catch::Contains("not in these readings"));  // another tank
  REQUIRE(bench.run(add + "'N-07 Watts nickel'" + log).status == 0);
  REQUIRE(bench.run("log add dump --note '200 L' --tank 'N-07 Watts nickel'" + log).status == 0);
  for (const std::string& verb : {"dose " + files, "tank " + app_test::tank + log}) {
    const auto run = bench.run(verb);
    INFO(verb << "\n" << run.out << run.err);
    CHECK(run.status == 1);
    CHECK_THAT(run.out, Catch::Contains("entry 5 (addition) is not in these readings") &&
                            Catch::Contains("entry 6 (dump)") && Catch::Contains("Next: "));
    CHECK_THAT(bench.run(verb + " --json").json().at("warnings").dump(),
               Catch::Contains("entry 5 (addition)"));
  }
}

TEST_CASE("an entry is shown in full and copyable, one that was corrected says so", "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", word(120, 'x');
  REQUIRE(bench.run("log add note --tank T --body '{\"a\":{\"" + word + "\":1}}'" + log).status == 0);
  CHECK_THAT(bench.run("log show 1" + log).out, Catch::Contains("\n    \"" + word + "\": 1\n"));
  REQUIRE(bench.run("log correct 1 --reason 'other tank'" + log).status == 0);
  CHECK_THAT(bench.run("log list --kind note" + log).out, Catch::Contains("note, corrected by 2"));
  CHECK(bench.run("log list --json" + log).json().at("entries").at(0).at("corrected_by") == json({2}));
}
