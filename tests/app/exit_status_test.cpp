// How a run ends, and that a run which ends badly leaves nothing behind.
#include <algorithm>
#include <catch2/catch.hpp>
#include <filesystem>

#include "program.hpp"

using app_test::Bench;

TEST_CASE("a broken file is answered with its place, and nothing is written", "[failure][command]") {
  int files = 0;
  for (const auto& file : std::filesystem::directory_iterator(PROJECT_DIR "/tests/engine/shopfiles/broken")) {
    const std::string path = file.path().string(), name = file.path().filename().string();
    const Bench bench;
    const auto before = bench.listing();
    const std::string quoted = "'" + path + "'";
    const auto run = bench.run(name.starts_with("tank") ? "tank " + quoted + " --log log.sqlite"
                               : name.starts_with("readings")
                                   ? "analyse " + app_test::tank + " " + quoted + " --log log.sqlite"
                                   : "solution " + quoted);
    INFO(name << "\n" << run.out << run.err);
    CHECK(run.status == 2);
    CHECK(run.out.empty());
    CHECK_THAT(run.err, Catch::Contains(path + ":"));
    CHECK(bench.listing() == before);
    ++files;
  }
  CHECK(files >= 30);
}

TEST_CASE("a run ends with the status it promises", "[unit][command]") {
  struct Case {
    const char* arguments;
    int status;
  };
  const Case c =
      GENERATE(Case{"", 3}, Case{"--help", 0}, Case{"--version", 0}, Case{"dose --help", 0},
               Case{"plugins list", 0}, Case{"sources Ni^2+", 0}, Case{"sources Nj^2+", 2},
               Case{"plugins show no-such", 2}, Case{"plugins check", 2}, Case{"plugins check no-such", 2},
               Case{"plugins check watts-nickel", 0}, Case{"no-such-verb", 2}, Case{"solution", 2},
               Case{"solution not-there.toml", 2}, Case{"log list --log not-there.sqlite", 2},
               Case{"log verify --log not-there.sqlite", 2}, Case{"log add gossip --tank T --note x", 2});
  const Bench bench;
  const auto run = bench.run(c.arguments);
  INFO(c.arguments << "\n" << run.out << run.err);
  CHECK(run.status == c.status);
  CHECK(run.err.empty() == (c.status == 0));
}

TEST_CASE("a tank as at its aims is well, one short of everything is a finding", "[unit][command]") {
  const Bench bench;
  CHECK(bench.run("dose " + app_test::tank + " " + app_test::readings).status == 1);
  const auto at_aims = bench.run("tank " + app_test::tank);
  CHECK_THAT(at_aims.out, Catch::Contains("as at its aims"));
}

TEST_CASE("a slip at the command line is answered in one line that mends it", "[failure][command]") {
  struct Case {
    std::string arguments, words;
  };
  const auto c = GENERATE_COPY(values<Case>({
      {"analyze", "Did you mean analyse?"},
      {"log lst", "Did you mean list?"},
      {"dose " + app_test::readings + " " + app_test::tank, "is a file of readings"},
      {"analyse " + app_test::tank + " " + app_test::tank, "is a tank file"},
      {"path " + app_test::tank + " --add '4 L boric-acid'", "is a solid"},
      {"path " + app_test::tank + " --add '4 kg'", "the chemical is missing"},
  }));
  const Bench bench;
  const auto run = bench.run(c.arguments);
  INFO(c.arguments << "\n" << run.err);
  CHECK(run.status == 2);
  CHECK_THAT(run.err, Catch::Contains(c.words));
  CHECK(std::count(run.err.begin(), run.err.end(), '\n') == 1);
}

TEST_CASE("an addition is a finding where it makes something worse, not where the tank was so before",
          "[unit][command]") {
  struct Case {
    const char *add, *words;
    int status;
  };
  const Case c = GENERATE(Case{"1 g nickel-chloride", "makes nothing worse", 0},
                          Case{"4 kg boric-acid", "forms, more than before", 1},
                          Case{"2 L sulfuric-acid", "pH leaves its window of 3.80 to 4.60", 1},
                          Case{"200 L water", "the tank overflows", 1});
  const auto run = Bench().run("path " + app_test::tank + " --add '" + c.add + "'");
  INFO(run.out << run.err);
  CHECK(run.status == c.status);
  CHECK_THAT(run.out, Catch::Contains(c.words));
}

TEST_CASE("a bad option or input in JSON mode still gives a document", "[failure][command]") {
  const Bench bench;
  bench.write("s.toml", "temperature = 25\n");
  const auto run = bench.run("solution s.toml --json");
  CHECK(run.status == 2);
  CHECK(run.json().at("problems").size() >= 1);
  CHECK(run.json().at("program") == "bathwright");
}
