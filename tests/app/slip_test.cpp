// The addition slip through the program: what an auditor finds on it, what keeps it from being issued, who
// stands for it.
#include <algorithm>
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;
using nlohmann::json;

namespace {

const std::string log_option = " --log shift.sqlite --by lab";

/// N-07 with these changes of its file, each "old|new".
std::string tank_with(const std::vector<std::pair<std::string, std::string>>& changes) {
  std::string text = app_test::content_of(app_test::tank);
  for (const auto& [from, to] : changes) {
    const std::size_t at = text.find(from);
    REQUIRE(at != std::string::npos);
    text.replace(at, from.size(), to);
  }
  return text;
}

const std::string shop_line = "shop = \"Brindlewick Surface Works\"\n";
const std::string revision_c =
    "limits = { revision = \"C\", from = 2026-01-15, owner = \"shift chemist\" }\n";

}  // namespace

TEST_CASE("the slip has what somebody who asks later needs", "[unit][command]") {
  const Bench bench;
  bench.write(
      "tank.toml",
      tank_with(
          {{shop_line, shop_line + "line = \"line 2\"\n" + revision_c},
           {"nickel-sulfate = { assay = \"99 %\"",
            "nickel-sulfate = { grade = \"plating\", lot = \"24-0815\", expires = 2027-06-30, assay = \"99 %\""}}));
  bench.write("readings.toml", "sample_number = \"0302-7\"\nsampled_by = \"J. Marsh\"\n" +
                                   app_test::content_of(app_test::readings));
  const auto run =
      bench.run("dose tank.toml readings.toml --slip --html slip.html --pdf slip.pdf" + log_option);
  INFO(run.out << run.err);
  for (const char* part :
       {"Slip 3", "line 2", "revision C from 2026-01-15, shift chemist",
        "no. 0302-7 of 2026-03-02 05:40 by J. Marsh", "by edta-nickel", "23.80 mL", "3 cm low on 200 dm2",
        "NiSO₄·6H₂O, 99 %, plating; lot 24-0815", "2027-06-30", "2 x 25 kg and", "most 10 g/L at once",
        "Expected after each step", "prepared", "approved", "carried out", "witness", "found after",
        "nonconformance", "Re-analyse"})
    CHECK_THAT(run.out, Catch::Contains(part));
  CHECK(app_test::widest_line(run.out) <= 80);
  // On paper: a page to work from, and one with what is read at the desk.
  const std::string pdf = bench.read("slip.pdf");
  std::size_t pages = 0;
  for (std::size_t at = pdf.find("/Type /Page "); at != std::string::npos;
       at = pdf.find("/Type /Page ", at + 1))
    ++pages;
  CHECK(pages == 2);
  CHECK_THAT(bench.read("slip.html"), Catch::Contains("<!DOCTYPE html>") && Catch::Contains("lot 24-0815") &&
                                          Catch::Contains("Slip 3"));
}

TEST_CASE("a slip shows the results before it", "[unit][command]") {
  const Bench bench;
  const std::string readings = app_test::content_of(app_test::readings);
  for (const char* burette : {"24.60 mL", "24.30 mL", "24.00 mL"}) {
    std::string earlier = readings;
    earlier.replace(earlier.find("23.80 mL"), 8, burette);
    bench.write("earlier.toml", earlier);
    (void)bench.run("analyse " + app_test::tank + " earlier.toml" + log_option);
  }
  const auto run = bench.run("dose " + app_test::tank + " " + app_test::readings + log_option);
  INFO(run.out);
  CHECK_THAT(run.out, Catch::Contains("before"));
  // 24.60 - 23.80 = 0.80 mL x 0.1012 x 262.839 / 2 = 10.6 g/L of nickel sulfate hexahydrate above 263.4.
  CHECK_THAT(run.out, Catch::Contains("274.1") && Catch::Contains("270.1") && Catch::Contains("266.1"));
}

TEST_CASE("a lot past its day stops the slip", "[failure][command]") {
  const Bench bench;
  bench.write("tank.toml",
              tank_with({{"nickel-sulfate = {", "nickel-sulfate = { lot = \"7\", expires = 2026-03-01,"}}));
  const std::string dose = "dose tank.toml " + app_test::readings;
  CHECK_THAT(bench.run(dose).out, Catch::Contains("STOP Lot 7 of nickel(II) sulfate hexahydrate expired"));
  const auto issued = bench.run(dose + " --slip" + log_option);
  CHECK(issued.status == 2);
  CHECK_THAT(issued.err, Catch::Contains("Lot 7 of nickel(II) sulfate hexahydrate expired"));
}

TEST_CASE("limits that changed without a new revision are told", "[failure][command]") {
  const Bench bench;
  const std::string log = log_option + " --json";
  bench.write("tank.toml", tank_with({{shop_line, shop_line + revision_c}}));
  (void)bench.run("dose tank.toml " + app_test::readings + log);
  CHECK(bench.run("dose tank.toml " + app_test::readings + log).json().at("stops").empty());
  const auto wider = std::pair<std::string, std::string>{"high = \"300 g/L\"", "high = \"320 g/L\""};
  bench.write("tank.toml", tank_with({{shop_line, shop_line + revision_c}, wider}));
  CHECK_THAT(bench.run("dose tank.toml " + app_test::readings + log).json().at("stops").dump(),
             Catch::Contains("though both are revision C"));
  std::string revision_d = revision_c;
  revision_d.replace(revision_d.find("\"C\""), 3, "\"D\"");
  bench.write("tank.toml", tank_with({{shop_line, shop_line + revision_d}, wider}));
  CHECK(bench.run("dose tank.toml " + app_test::readings + log).json().at("stops").empty());
}

TEST_CASE("a slip is approved by somebody else", "[failure][command]") {
  const Bench bench;
  REQUIRE(bench.run("dose " + app_test::tank + " " + app_test::readings + " --slip --json" + log_option)
              .json()
              .at("slip") == 3);
  const auto own = bench.run("log approve 3" + log_option);
  CHECK(own.status == 2);
  CHECK_THAT(own.err, Catch::Contains("lab prepared this slip"));
  const auto other = bench.run("log approve 3 --by chemist --json --log shift.sqlite");
  INFO(other.err);
  CHECK(other.json().at("entry").at("kind") == "slip-approved");
  CHECK(other.json().at("entry").at("slip") == 3);
}
