// No way in for what must never meet.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;

TEST_CASE("acid does not go into a cyanide tank, by no verb", "[failure][app]") {
  const Bench bench;
  const std::string tank = PROJECT_DIR "/baths/c-04.toml";
  const auto path = bench.run("path " + tank + " --add '5 L sulfuric-acid'");
  CHECK(path.status == 2);
  CHECK(path.err.find("acid_cyanide") != std::string::npos);
  CHECK(path.out.empty());
  CHECK(bench.run("path " + tank + " --add '2 kg sodium-hydroxide'").status < 2);

  // On the shelf by mistake, it is in no plan.
  bench.write("readings.toml",
              "temperature = \"65 degC\"\n[[found]]\nquantity = \"CuCN\"\nvalue = \"70 g/L\"\n"
              "[[found]]\nquantity = \"free NaCN\"\nvalue = \"12 g/L\"\n"
              "[[found]]\nquantity = \"NaOH\"\nvalue = \"25 g/L\"\n"
              "[[found]]\nquantity = \"Na2CO3\"\nvalue = \"40 g/L\"\n"
              "[[found]]\nquantity = \"KNaC4H4O6.4H2O\"\nvalue = \"45 g/L\"\n");
  const std::string shelf =
      "cat '" + tank + "' > tank.toml && echo 'sulfuric-acid = { price = 1, unit = \"L\" }' >> tank.toml";
  REQUIRE(std::system(("cd '" + (bench.folder() / "work").string() + "' && " + shelf).c_str()) == 0);
  const auto sheet = bench.run("dose tank.toml readings.toml --json").json();
  REQUIRE(sheet.contains("refused"));
  bool refused = false;
  for (const auto& one : sheet.at("refused"))
    refused = refused || one.at("rule").get<std::string>() == "interlock: acid_cyanide";
  CHECK(refused);
  for (const auto& plan : sheet.at("plans"))
    for (const auto& addition : plan.at("additions"))
      CHECK(addition.at("chemical").get<std::string>() != "sulfuric-acid");
}

TEST_CASE("cyanide does not go into an acid tank", "[failure][app]") {
  const Bench bench;
  const auto run = bench.run("path " + app_test::tank + " --add '1 kg sodium-cyanide'");
  CHECK(run.status == 2);
  CHECK(run.err.find("must not go into this bath") != std::string::npos);
}

namespace {

/// A bench whose log holds an analysis of the copper cyanide tank.
struct CyanideLog {
  Bench bench;
  const std::string log = " --log shift.sqlite";
  const std::string add = "log add addition --tank 'C-04 copper cyanide'";
  CyanideLog() {
    REQUIRE(bench
                .run("analyse " PROJECT_DIR "/baths/c-04.toml " PROJECT_DIR
                     "/baths/readings/c-04-morning.toml" +
                     log)
                .status <= 1);
  }
  [[nodiscard]] std::size_t entries() const {
    return bench.run("log list --json" + log).json().at("entries").size();
  }
};

}  // namespace

TEST_CASE("acid into cyanide is not logged as work, and is logged as what happened", "[failure][app]") {
  const CyanideLog shop;
  const std::size_t before = shop.entries();
  for (const char* what :
       {"--body '{\"chemical\": \"sulfuric-acid\", \"amount\": \"2 L\"}'",
        "--note '2 L sulphuric acid, for the pH'", "--note '2 L sulfuric acid, for the pH'",
        "--body '{\"chemical\": \"hydrochloric_acid\", \"amount\": \"1 kg\"}'"}) {
    INFO(what);
    const auto work = shop.bench.run(shop.add + " " + what + shop.log);
    CHECK(work.status == 1);
    CHECK_THAT(work.out, Catch::Contains("STOP") && Catch::Contains("acid_cyanide") &&
                             Catch::Contains("Nothing was logged") && Catch::Contains("emergency plan") &&
                             Catch::Contains("safety data sheets") && Catch::Contains("local codes"));
  }
  CHECK(shop.entries() == before);
  const auto told = shop.bench.run(shop.add + " --event --note '2 L sulfuric acid' --json" + shop.log);
  CHECK(told.status == 1);
  CHECK(told.json().at("stops").at(0).at("rule") == "acid_cyanide");
  CHECK(told.json().at("entry").at("body").at("event") == true);
  CHECK(told.json().at("entry").at("body").at("note") == "2 L sulfuric acid");
  CHECK(shop.entries() == before + 1);
  CHECK(shop.bench.run(shop.add + " --note '2 kg sodium hydroxide'" + shop.log).status == 0);
  CHECK(shop.bench.run(shop.add + " --event --slip 1 --note '2 L sulfuric acid'" + shop.log).status == 2);
}

TEST_CASE("what went in since the last analysis counts, and what cannot be judged is said",
          "[failure][app]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", add = "log add addition --tank 'N-07 Watts nickel'";
  CHECK_THAT(bench.run(add + " --note '1 kg boric acid'" + log).out, Catch::Contains("Not held against"));
  REQUIRE(bench.run("analyse " + app_test::tank + " " + app_test::readings + log).status <= 1);
  CHECK(bench.run(add + " --note '1 kg sodium hypochlorite'" + log).status == 1);
  CHECK(bench.run(add + " --event --note '1 kg sodium hypochlorite'" + log).status == 1);
  const auto ammonia = bench.run(add + " --note '1 L ammonia solution'" + log);
  INFO(ammonia.out);
  CHECK(ammonia.status == 1);
  CHECK_THAT(ammonia.out, Catch::Contains("went in since the last analysis"));
}

TEST_CASE("a tank that asks for approval takes nothing against a slip nobody approved", "[failure][app]") {
  const Bench bench;
  const std::string log = " --log shift.sqlite", tank = "'N-07 Watts nickel'";
  bench.write("chemist", "271828\n");
  bench.write("hand", "314159\n");
  bench.write("chemist-hand", "271828\n314159\n");
  bench.write("second", "161803\n");
  bench.write("chemist-second", "271828\n161803\n");
  const std::string chemist = " --by 'A. Chemist' --pin-file chemist" + log,
                    hand = " --by 'O. Hand' --pin-file hand" + log,
                    second = " --by 'B. Second' --pin-file second" + log;
  REQUIRE(bench.run("log people admit 'A. Chemist' --role chemist --pin-file chemist" + log).status == 0);
  REQUIRE(
      bench.run("log people admit 'O. Hand' --role operator --by 'A. Chemist' --pin-file chemist-hand" + log)
          .status == 0);
  REQUIRE(bench
              .run("log people admit 'B. Second' --role chemist --by 'A. Chemist' --pin-file chemist-second" +
                   log)
              .status == 0);
  REQUIRE(bench.run("log shifts 3x8 --zone Europe/Berlin" + chemist).status == 0);
  REQUIRE(bench.run("log people second --tank " + tank + " slip-approved" + chemist).status == 0);
  const auto slip = bench.run("log add slip --tank " + tank + " --note '14 kg boric acid' --json" + chemist);
  const std::string number = std::to_string(slip.json().at("entry").at("seq").get<int>());
  const std::string add =
      "log add addition --tank " + tank + " --slip " + number + " --note '14 kg boric acid'" + hand;
  const auto refused = bench.run(add);
  CHECK(refused.status == 2);
  CHECK_THAT(refused.err, Catch::Contains("slip " + number + " is not approved"));
  CHECK_THAT(bench.run("log hand-over " + app_test::tank + log).out, Catch::Contains("NOT APPROVED"));
  REQUIRE(bench.run("log approve " + number + second).status == 0);
  CHECK(bench.run(add).status == 0);
  CHECK_THAT(bench.run("log hand-over " + app_test::tank + log).out,
             Catch::Contains("Approved by B. Second."));
  CHECK(bench.run("log hand-over --json " + app_test::tank + log).json().at("slips_not_approved").empty());
  CHECK(bench.run("log verify" + log).status == 0);
}
