// The shift log from the command line: written, listed, corrected, verified.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

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

TEST_CASE("people sign with their PINs, and a tank that asks for it gets two signatures",
          "[failure][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  bench.write("chemist", "271828\n");
  bench.write("hand", "314159\n");
  bench.write("chemist-hand", "271828\n314159\n");
  bench.write("hand-chemist", "314159\n271828\n");
  REQUIRE(bench.run("log people admit 'A. Chemist' --role chemist --pin-file chemist" + log).status == 0);
  REQUIRE(
      bench.run("log people admit 'O. Hand' --role operator --by 'A. Chemist' --pin-file chemist-hand" + log)
          .status == 0);
  const std::string add = "log add addition --tank N-1 --note '12 kg' --by 'O. Hand'" + log;
  CHECK_THAT(bench.run("log add note --tank N-1 --note hello" + log).err,
             Catch::Contains("\"tester\" is none of the log's people"));
  CHECK_THAT(bench.run(add + " --pin-file chemist").err, Catch::Contains("not the PIN of O. Hand"));
  CHECK_THAT(bench.run(add).err, Catch::Contains("--pin-file"));
  CHECK_THAT(bench.run(add + " --pin-file hand").out, Catch::Contains("signed by O. Hand"));
  REQUIRE(
      bench.run("log people second --tank N-1 addition --by 'A. Chemist' --pin-file chemist" + log).status ==
      0);
  CHECK_THAT(bench.run(add + " --pin-file hand").err, Catch::Contains("asks for a second signature"));
  const auto two = bench.run(add + " --witness 'A. Chemist' --pin-file hand-chemist --json");
  CHECK(two.json().at("entry").at("witness") == "A. Chemist");
  CHECK(two.json().at("entry").at("role") == "operator");
  CHECK(bench.run("log people list --json" + log).json().at("people").size() == 2);
  CHECK(bench.run("log verify" + log).status == 0);
}

TEST_CASE("shifts are set once, named in every entry and handed over with what is open, out and due",
          "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", files = app_test::tank + " " + app_test::readings + log;
  CHECK_THAT(bench.run("log shifts 3x9 --zone Europe/Berlin" + log).err, Catch::Contains("3x8"));
  CHECK_THAT(bench.run("log shifts 3x8 --zone Europe/Berlinn" + log).err, Catch::Contains("Europe/Berlin"));
  CHECK_FALSE(std::filesystem::exists(bench.folder() / "work/shift.sqlite"));
  REQUIRE(bench.run("log shifts 3x8 --zone Europe/Berlin" + log).status == 0);
  (void)bench.run("analyse " + files);
  REQUIRE(bench.run("log add slip --tank 'N-07 Watts nickel' --note '14 kg boric acid'" + log).status == 0);
  CHECK_THAT(bench.run("log add slip --tank 'N-07 Watts nickel' --note '14 kg boric acid'" + log).err,
             Catch::Contains("slip 3") && Catch::Contains("still open"));
  const auto told = bench.run("log hand-over --json " + app_test::tank + log);
  INFO(told.out << told.err);
  CHECK(told.status == 1);
  CHECK(told.json().at("open_slips") == json({3}));
  CHECK(told.json().at("out_of_window").at(0).at("quantity") == "H3BO3");
  CHECK(told.json().at("due").at(0).at("what") == "analysis of pH");
  CHECK(told.json().at("head").at("seq") == 3);
  CHECK(bench.run("log list --json" + log).json().at("entries").at(1).at("shift") ==
        told.json().at("shift").at("label"));
  REQUIRE(
      bench
          .run(
              "log add addition --slip 3 --tank 'N-07 Watts nickel' --note '14 kg' --happened '2026-03-02 05:40'" +
              log)
          .status == 0);
  REQUIRE(bench.run("log close 3" + log).status == 0);
  CHECK(bench.run("log close 3" + log).status == 2);
  CHECK(bench.run("log show 4 --json" + log).json().at("entry").at("happened") == "2026-03-02T04:40:00.000Z");
  const auto after = bench.run("log hand-over --sign --by 'M. Okafor' --json " + app_test::tank + log).json();
  CHECK(after.at("open_slips").empty());
  CHECK(after.at("logged_as") == 6);
}

TEST_CASE("a hash noted elsewhere shows an end that was cut off", "[failure][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  for (const char* note : {"one", "two"})
    REQUIRE(bench.run("log add note --tank T --note " + std::string(note) + log).status == 0);
  std::filesystem::copy_file(bench.folder() / "work/shift.sqlite", bench.folder() / "work/cut.sqlite");
  REQUIRE(bench.run("log add note --tank T --note three" + log).status == 0);
  REQUIRE(bench.run("log anchor hashes.txt" + log).status == 0);
  CHECK(bench.run("log verify --against hashes.txt" + log).status == 0);
  const auto cut = bench.run("log verify --against hashes.txt --log cut.sqlite");
  CHECK(cut.status == 1);
  CHECK_THAT(cut.out, Catch::Contains("entry 3 noted with hash"));
  CHECK(bench.run("log verify --log cut.sqlite").status == 0);
  CHECK(bench.run("log verify --against nonsense" + log).status == 2);
}

TEST_CASE("a laboratory's CSV comes in once, bad rows are told, and the log goes out as CSV",
          "[unit][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", in = "log import lab.csv --columns lab.toml --json" + log;
  bench.write("lab.csv",
              "Tank;Sampled;Ni g/L;pH\n"
              "N-1;02.03.2026 05:40;74,2;4,1\n"
              "N-1;03.03.2026 05:40;seventy;4,2\n"
              "N-2;03.03.2026 05:50;61,0;\n");
  CHECK_THAT(bench.run(in).err, Catch::Contains("\"Ni g/L\""));
  bench.write(
      "lab.toml",
      "zone = \"Europe/Berlin\"\ndates = \"d.m.y\"\ndecimal = \",\"\ntank = \"Tank\"\nsampled = \"Sampled\"\npH = \"pH\"\n"
      "[[quantity]]\ncolumn = \"Ni g/L\"\nquantity = \"Ni^2+\"\nunit = \"g/L\"\n");
  const auto first = bench.run(in);
  INFO(first.out << first.err);
  CHECK(first.status == 1);
  CHECK(first.json().at("logged") == json({1, 2}));
  CHECK(first.json().at("rejected").at(0).at("line") == 3);
  CHECK(first.json().at("rejected").at(0).at("column") == "Ni g/L");
  const auto again = bench.run(in).json();
  CHECK(again.at("logged").empty());
  CHECK(again.at("already_logged").at(0) == json({{"line", 2}, {"seq", 1}}));
  const json entry = bench.run("log show 1 --json" + log).json().at("entry");
  CHECK(entry.at("happened") == "2026-03-02T04:40:00.000Z");
  CHECK(entry.at("body").at("results").at(0).at("value") == 74.2);

  REQUIRE(bench.run("log export out.csv --tank N-1" + log).status == 0);
  const std::string csv = bench.read("out.csv");
  CHECK_THAT(csv, Catch::Contains("\"N-1\"") && Catch::Contains("\"Ni^2+\",74.2,\"g/L\""));
  REQUIRE(bench.run("log export out.csv --decimal-comma" + log).status == 0);
  CHECK_THAT(bench.read("out.csv"), Catch::Contains("\"Ni^2+\";74,2;\"g/L\""));
}

TEST_CASE("a slip is issued from a plan, and none beside one that is open", "[failure][command]") {
  const Bench bench;
  const std::string dose = "dose " + app_test::tank + " " + app_test::readings + " --log shift.sqlite ";
  CHECK_THAT(bench.run("dose --slip " + app_test::tank + " " + app_test::readings).err,
             Catch::Contains("--log"));
  const auto issued = bench.run(dose + "--slip --json");
  INFO(issued.err);
  CHECK(issued.json().at("logged_as") == json({1, 2, 3}));
  CHECK(issued.json().at("slip") == 3);
  const json slip = bench.run("log show 3 --json --log shift.sqlite").json().at("entry");
  CHECK(slip.at("kind") == "slip");
  CHECK_FALSE(slip.at("body").at("plan").at("steps").empty());
  CHECK_THAT(slip.at("bath_type").get<std::string>(), Catch::Contains("watts-nickel"));
  CHECK_FALSE(slip.at("body").at("inputs").at("readings_file").get<std::string>().empty());
  const auto again = bench.run(dose + "--slip");
  CHECK(again.status == 2);
  CHECK_THAT(again.err, Catch::Contains("no slip is issued: Slip 3 is open"));
  CHECK(bench.run("log list --json --log shift.sqlite").json().at("entries").size() == 3);
  CHECK_THAT(bench.run(dose).out, Catch::Contains("Slip 3 is open") && Catch::Contains("do not add"));
}

TEST_CASE("a damaged log is said, and what it still holds can be had", "[failure][command]") {
  const Bench bench;
  for (int i = 0; i < 30; ++i)
    REQUIRE(bench
                .run("log add note --tank T --body '{\"text\":\"" + std::string(800, 'x') +
                     "\"}' --log shift.sqlite")
                .status == 0);
  const auto log = bench.folder() / "work/shift.sqlite";
  {
    constexpr std::streamoff head_of_the_file = 100;
    std::fstream file(log, std::ios::in | std::ios::out | std::ios::binary);
    file.write(std::string(head_of_the_file, '?').data(), head_of_the_file);
  }
  CHECK(bench.run("log list --log shift.sqlite").status != 0);
  const auto run = bench.run("log salvage rest.json --json --log shift.sqlite");
  INFO(run.out << run.err);
  CHECK(run.json().at("entries") >= 25);
  const json rest = json::parse(bench.read("rest.json"));
  CHECK(rest.at("entries").back().at("seq") == 30);
}

TEST_CASE("a corrected analysis is no state to start from", "[failure][command]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite";
  (void)bench.run("analyse " + app_test::tank + " " + app_test::readings + log);
  CHECK_THAT(bench.run("tank " + app_test::tank + log).out, Catch::Contains("log entry 1"));
  REQUIRE(bench.run("log correct 1 --reason 'sample of another tank'" + log).status == 0);
  const auto run = bench.run("tank " + app_test::tank + log);
  CHECK(run.status == 2);
  CHECK_THAT(run.err, Catch::Contains("analysis 1") && Catch::Contains("was corrected"));
}
