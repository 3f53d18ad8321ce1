#include <sys/stat.h>

#include <bathwright/shopfiles/analysis_columns.hpp>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <sstream>

using namespace bathwright;
using namespace bathwright::shopfiles;

namespace {

AnalysisColumns lab() {
  return {.delimiter = ';',
          .decimal_sign = ',',
          .dates = DateOrder::day_month_year,
          .zone = "Europe/Berlin",
          .tank = "Becken \"A\"",
          .sampled = "Datum",
          .time = "Uhrzeit",
          .pH = "pH",
          .temperature = UnitColumn{"T \\ °C", "degC"},
          .volume = UnitColumn{"Stand", "L"},
          .quantities = {{"Ni g/L", "Ni^2+", "g/L"}, {"Chloride", "Cl^-", "mol/L"}}};
}

std::string told(const AnalysisColumns& columns) { return text(check(columns)); }

std::string told(const char* toml) {
  const auto read = read_columns_text("lab.toml", toml);
  return read ? "" : text(read.problems());
}

std::filesystem::path scratch_folder() {
  const auto folder = std::filesystem::path(TEST_CACHE) / "analysis_columns";
  std::filesystem::remove_all(folder);
  std::filesystem::create_directories(folder);
  return folder;
}

}  // namespace

TEST_CASE("columns survive their file", "[unit][shopfiles]") {
  AnalysisColumns least = lab();
  least.delimiter.reset();
  least.time.clear();
  least.temperature.reset();
  least.volume.reset();
  AnalysisColumns american = least;
  american.dates = DateOrder::month_day_year;
  american.decimal_sign = '.';
  american.delimiter = '\t';
  AnalysisColumns iso = least;
  iso.dates = DateOrder::year_month_day;
  iso.delimiter = ',';
  for (const AnalysisColumns& columns : {lab(), least, american, iso}) {
    const std::string written = columns_text(columns);
    INFO(written);
    const auto back = read_columns_text("lab.toml", written);
    REQUIRE(back);
    CHECK(*back == columns);
  }
}

TEST_CASE("a file of columns is written whole, over an older one", "[unit][shopfiles]") {
  const auto folder = scratch_folder();
  const std::string path = folder / "lab.toml";
  AnalysisColumns older = lab();
  older.time = "old";
  REQUIRE(write_columns(path, older));
  REQUIRE(write_columns(path, lab()));
  const auto back = read_columns(path);
  REQUIRE(back);
  CHECK(*back == lab());
  const auto files = std::distance(std::filesystem::directory_iterator(folder), {});
  CHECK(files == 1);  // no temporary is left
}

TEST_CASE("columns that cannot be written leave the old file", "[failure][shopfiles]") {
  const auto folder = scratch_folder();
  const std::string path = folder / "lab.toml";
  REQUIRE(write_columns(path, lab()));
  AnalysisColumns bad = lab();
  bad.tank = "line\nbreak";
  CHECK_FALSE(write_columns(path, bad));
  CHECK(*read_columns(path) == lab());

  const auto nowhere = write_columns(folder / "no such folder" / "lab.toml", lab());
  REQUIRE_FALSE(nowhere);
  CHECK_THAT(text(nowhere.problems()), Catch::Contains("cannot be written: No such file or directory"));
  std::filesystem::create_directory(folder / "taken");
  CHECK_FALSE(write_columns(folder / "taken", lab()));
  CHECK(std::distance(std::filesystem::directory_iterator(folder), {}) == 2);
}

TEST_CASE("columns that make no sense are answered with everything that is wrong", "[failure][shopfiles]") {
  CHECK(told(lab()).empty());
  AnalysisColumns bad = lab();
  bad.zone = "Europe/Berlim";
  bad.delimiter = '|';
  bad.decimal_sign = ';';
  bad.tank = "";
  bad.pH = "Datum";
  bad.temperature->unit = "g/L";
  bad.volume->unit = "gal";
  bad.quantities = {{"Ni", "Ni^2+", "g/L"},
                    {"Ni", "Ni^2+", "ppm w/w"},
                    {"Brightener", "brightener", "mol/L"},
                    {"Acid", "", "% w/v"},
                    {"B", "H3BO3", "furlong"}};
  const std::string message = told(bad);
  INFO(message);
  for (const char* piece :
       {"zone: the time zone 'Europe/Berlim' is not known", "delimiter: is none that is known",
        "decimal: is no decimal sign", "tank: has no column",
        "pH: is read from the column 'Datum', as something",
        "column 'T \\ °C': unit: ", "column 'Stand': unit: ", "quantity: is read from the column 'Ni', as",
        "column 'Ni': quantity: is Ni^2+, which another column gives", "column 'Ni': unit: ",
        "column 'Brightener': unit: ", "column 'Acid': quantity: is missing", "column 'B': unit: "})
    CHECK_THAT(message, Catch::Contains(piece));
  CHECK(check(bad).size() == 13);

  AnalysisColumns idle = lab();
  idle.quantities.clear();
  idle.pH.clear();
  idle.temperature.reset();
  idle.volume.reset();
  CHECK_THAT(told(idle), Catch::Contains("no column holds anything measured"));
}

TEST_CASE("a file of columns is answered with its line", "[failure][shopfiles]") {
  const std::string message = told(
      "dates = \"m.d.y\"\ndecimal = 5\ndelimitor = \";\"\ntank = \"Tank\"\nsampled = \"Date\"\n"
      "zone = \"UTC\"\n[[quantity]]\ncolumn = \"Ni\"\nunit = \"g/L\"\n");
  INFO(message);
  for (const char* piece : {R"(lab.toml:1: dates: is "m.d.y"; expected "d.m.y" or "m/d/y" or "y-m-d")",
                            "lab.toml:2: decimal: 5 is not", "lab.toml:3: delimitor: is not a key",
                            "lab.toml:7: quantity.quantity: is missing"})
    CHECK_THAT(message, Catch::Contains(piece));
  CHECK_THAT(told("tank = \"T\"\nsampled = \"D\"\nzone = \"UTC\"\npH = \"pH\"\ndecimal = \".\"\n"),
             Catch::Contains("dates: is missing"));  // never guessed
  CHECK_THAT(
      told(
          "tank = \"T\"\nsampled = \"T\"\nzone = \"UTC\"\npH = \"pH\"\ndecimal = \".\"\ndates = \"y-m-d\"\n"),
      Catch::Contains("lab.toml: sampled: is read from the column 'T'"));
}
