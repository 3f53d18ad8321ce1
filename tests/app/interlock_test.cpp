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
