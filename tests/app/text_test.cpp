// What people read: it fits the page and says what to do next.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;

TEST_CASE("every sheet is at most 80 columns wide", "[unit][command]") {
  const Bench bench;
  bench.write(
      "s.toml",
      "temperature = \"25 degC\"\n[per_kg_water]\n\"NiSO4.6H2O\" = 1.0\n\"H2SO4\" = 0.1\n\"H3BO3\" = 0.4\n");
  const std::string files = app_test::tank + " " + app_test::readings;
  const std::string arguments = GENERATE_COPY(values<std::string>(
      {"solution s.toml", "tank " + app_test::tank,
       "tank " + app_test::tank + " --readings " + app_test::readings, "analyse " + files, "dose " + files,
       "path " + app_test::tank + " --add '12 kg nickel-sulfate'", "sources Ni^2+", "sources 'NiSO4.6H2O'",
       "plugins show watts-nickel", "plugins check watts-nickel"}));
  const auto run = bench.run(arguments);
  INFO(arguments << "\n" << run.out << run.err);
  CHECK(run.status <= 1);
  CHECK(run.out.size() > 200);
  CHECK(app_test::widest_line(run.out) <= 80);
}

TEST_CASE("formulae are shown as people write them", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run("analyse " + app_test::tank + " " + app_test::readings);
  CHECK_THAT(run.out, Catch::Contains("Ni²⁺") && Catch::Contains("H₃BO₃"));
  CHECK_THAT(run.out, Catch::Contains("Next:"));
}

TEST_CASE("the slip tells its doubts in few words, defers once, and shows what was read", "[unit][command]") {
  const auto run = Bench().run("dose " + app_test::tank + " " + app_test::readings);
  const auto times = [&](const std::string& words) {
    std::size_t count = 0;
    for (std::size_t at = run.out.find(words); at != std::string::npos; at = run.out.find(words, at + 1))
      ++count;
    return count;
  };
  INFO(run.out);
  CHECK_THAT(run.out, Catch::Contains("What is doubtful") && !Catch::Contains("doi:"));
  CHECK(times("safety data sheet") == 1);
  CHECK(times("supplier's SDS") == 0);
  CHECK_THAT(run.out, Catch::Contains("Watch ---") && Catch::Contains("3 cm low on 200 dm2"));
  CHECK(times(" 4.10 ") >= 1);  // as read; 4.11 at the working temperature
}

TEST_CASE("the help of every verb ends with the options all of them take", "[unit][command]") {
  const std::string verb =
      GENERATE("analyse", "dose", "tank", "path", "log", "log add", "log list", "solution", "sources",
               "plugins", "plugins show", "plugins check", "plugins allow", "plugins forget");
  const auto run = Bench().run(verb + " --help");
  CHECK_THAT(run.out, Catch::Contains("Every verb takes:") && Catch::Contains("--log") &&
                          Catch::Contains("--json") && Catch::Contains("--plugins"));
}

TEST_CASE("without a verb and a display the program says what to do instead", "[unit][command]") {
  const auto run = Bench().run("");
  CHECK(run.status == 3);
  CHECK(run.out.empty());
  CHECK(
      run.err ==
      "desktop: there is no display. Start it where a display is (DISPLAY is not set), or use the command line, "
      "which does the same: bathwright --help.\n");
}
