#include <algorithm>
#include <bathwright/shopfiles/analyses_csv.hpp>
#include <catch2/catch.hpp>
#include <charconv>
#include <filesystem>
#include <fstream>
#include <random>
#include <set>

using namespace bathwright;
using namespace bathwright::shopfiles;
using std::chrono::hours;
using std::chrono::minutes;

namespace {

AnalysisColumns columns_of(char decimal_sign, DateOrder dates) {
  return {.decimal_sign = decimal_sign,
          .dates = dates,
          .zone = "Europe/Berlin",
          .tank = "Tank",
          .sampled = "Sampled",
          .pH = "pH",
          .temperature = UnitColumn{"Temp", "degC"},
          .volume = UnitColumn{"Volume", "L"},
          .quantities = {{"Ni g/L", "Ni^2+", "g/L"}, {"Cl", "Cl^-", "mol/L"}}};
}

const AnalysisColumns german = columns_of(',', DateOrder::day_month_year);
const std::string german_head = "Tank;Sampled;Ni g/L;Cl;pH;Temp;Volume;Remark\n";

ImportedAnalyses import_good(const std::string& text, const AnalysisColumns& columns = german) {
  auto imported = import_analyses_text("lab.csv", text, columns);
  if (!imported) FAIL(bathwright::text(imported.problems()));
  return *std::move(imported);
}

std::string refusal(const std::string& text, const AnalysisColumns& columns = german) {
  const auto imported = import_analyses_text("lab.csv", text, columns);
  REQUIRE_FALSE(imported);
  return bathwright::text(imported.problems());
}

/// Why the one row below the German head is rejected, one reason a line.
std::string rejection(const std::string& row) {
  const ImportedAnalyses imported = import_good(german_head + row + '\n');
  REQUIRE(imported.rows == 1);
  REQUIRE(imported.analyses.empty());
  REQUIRE(imported.rejected.size() == 1);
  CHECK(imported.rejected[0].line == 2);
  CHECK(imported.rejected[0].written == row);
  std::string reasons;
  for (const Rejection& reason : imported.rejected[0].reasons) {
    const std::string place = "lab.csv:2" + (reason.column.empty() ? "" : ": " + reason.column);
    CHECK(reason.problem.where == place);
    reasons += reason.problem.text() + '\n';
  }
  return reasons;
}

shifts::UtcTime utc(int year, unsigned month, unsigned day, int hour, int minute) {
  using namespace std::chrono;
  return sys_days(std::chrono::year(year) / static_cast<int>(month) / static_cast<int>(day)) + hours(hour) +
         minutes(minute);
}

}  // namespace

TEST_CASE("a row becomes an analysis", "[unit][shopfiles]") {
  const ImportedAnalyses imported =
      import_good(german_head + "N-07;02.03.2026 05:40;75,2;0,40;4,1;54,5;2340;\"a \"\"good\"\"; one\"\n" +
                  "N-08;3.3.2026 17:05:30;;;;55;;\n");
  REQUIRE(imported.rejected.empty());
  CHECK(imported.rows == 2);
  REQUIRE(imported.analyses.size() == 2);
  const ImportedAnalysis& first = imported.analyses[0];
  CHECK(first.line == 2);
  CHECK(first.tank == "N-07");
  CHECK(first.sampled == utc(2026, 3, 2, 4, 40));  // Berlin is an hour ahead
  REQUIRE(first.levels.size() == 2);
  CHECK(first.levels[0] == ImportedLevel{"Ni^2+", {75.2}});
  CHECK(first.levels[1].value.v ==
        Approx(0.40 * 35.45).epsilon(1e-4));  // IUPAC 2021, chlorine [35.446, 35.457]
  CHECK(first.pH == 4.1);
  CHECK(first.temperature == units::Celsius{54.5});
  CHECK(first.volume == units::Litres{2340});
  const ImportedAnalysis& second = imported.analyses[1];
  CHECK(second.levels.empty());
  CHECK_FALSE(second.pH);
  CHECK(second.temperature == units::Celsius{55});
  CHECK(second.sampled == utc(2026, 3, 3, 16, 5) + std::chrono::seconds(30));
}

TEST_CASE("delimiter, byte order mark and line ends are found out", "[unit][shopfiles]") {
  const std::vector<std::string> texts = {
      "Tank;Sampled;Ni g/L;Cl;pH;Temp;Volume\nN-07;02.03.2026 05:40;75,2;;;;\n",
      "\xef\xbb\xbfTank\tSampled\tNi g/L\tCl\tpH\tTemp\tVolume\r\nN-07\t02.03.2026 05:40\t75,2\t\t\t\t\r\n",
      "Tank,Sampled,Ni g/L,Cl,pH,Temp,Volume\rN-07,02.03.2026 05:40,\"75,2\",,,,\r",
      "sep=;\r\nTank;Sampled;Ni g/L;Cl;pH;Temp;Volume\r\n\r\nN-07;02.03.2026 05:40;75,2;;;;",
      "\n\nVolume; pH ;Temp;Cl;\"Ni\ng/L\";\"Sampled\";\"Tank\"\n;;;;75,2;02.03.2026 05:40; N-07 \n;;;;;;\n"};
  for (const std::string& text : texts) {
    INFO(text);
    const ImportedAnalyses imported = import_good(text);
    CHECK(imported.rejected.empty());
    REQUIRE(imported.analyses.size() == 1);
    CHECK(imported.analyses[0].tank == "N-07");
    CHECK(imported.analyses[0].levels == std::vector<ImportedLevel>{{"Ni^2+", {75.2}}});
  }
  const auto headings = csv_headings("lab.csv", texts[4]);
  REQUIRE(headings);
  CHECK(*headings == std::vector<std::string>{"Volume", "pH", "Temp", "Cl", "Ni g/L", "Sampled", "Tank"});
}

TEST_CASE("dates are read in the order given, and in no other", "[unit][shopfiles]") {
  struct Row {
    DateOrder order;
    const char* written;
    shifts::UtcTime moment;
  };
  const Row row = GENERATE(values<Row>({
      {DateOrder::day_month_year, "2.3.2026 5:40", utc(2026, 3, 2, 4, 40)},
      {DateOrder::day_month_year, "02/03/2026 05:40", utc(2026, 3, 2, 4, 40)},
      {DateOrder::month_day_year, "2/3/2026 5:40", utc(2026, 2, 3, 4, 40)},
      {DateOrder::month_day_year, "02/03/2026 5:40 PM", utc(2026, 2, 3, 16, 40)},
      {DateOrder::month_day_year, "02/03/2026 12:10 am", utc(2026, 2, 2, 23, 10)},
      {DateOrder::month_day_year, "02/03/2026 12:10PM", utc(2026, 2, 3, 11, 10)},
      {DateOrder::year_month_day, "2026-03-02T05:40", utc(2026, 3, 2, 4, 40)},
      {DateOrder::year_month_day, "2026-07-02 05:40", utc(2026, 7, 2, 3, 40)},
      {DateOrder::year_month_day, "2026-03-02T05:40Z", utc(2026, 3, 2, 5, 40)},
      {DateOrder::year_month_day, "2026-03-02 05:40-06:00", utc(2026, 3, 2, 11, 40)},
      {DateOrder::day_month_year, "25.10.2026 02:30 +02:00", utc(2026, 10, 25, 0, 30)},
      {DateOrder::day_month_year, "25.10.2026 02:30 +0100", utc(2026, 10, 25, 1, 30)},
      {DateOrder::day_month_year, "29.2.2028 12:00", utc(2028, 2, 29, 11, 0)},
  }));
  INFO(row.written);
  const ImportedAnalyses imported =
      import_good("Tank;Sampled;Ni g/L;Cl;pH;Temp;Volume\nN-07;" + std::string(row.written) + ";75;;;;\n",
                  columns_of('.', row.order));
  REQUIRE(imported.analyses.size() == 1);
  CHECK(imported.analyses[0].sampled == row.moment);
}

TEST_CASE("the time of day may have a column of its own", "[unit][shopfiles]") {
  AnalysisColumns columns = columns_of('.', DateOrder::month_day_year);
  columns.time = "Time";
  const std::string head = "Tank,Sampled,Time,Ni g/L,Cl,pH,Temp,Volume\n";
  const ImportedAnalyses imported =
      import_good(head + "N-07,3/2/2026,5:40 AM,75,,,,\nN-07,3/2/2026,,75,,,,\n", columns);
  REQUIRE(imported.analyses.size() == 1);
  CHECK(imported.analyses[0].sampled == utc(2026, 3, 2, 4, 40));
  REQUIRE(imported.rejected.size() == 1);
  CHECK_THAT(imported.rejected[0].reasons[0].problem.text(), Catch::Contains("has no time of day"));
}

TEST_CASE("a row is rejected with line, column, fault and mend", "[failure][shopfiles]") {
  struct Row {
    const char* written;
    std::vector<std::string> pieces;
  };
  const Row row = GENERATE(values<Row>({
      {";02.03.2026 05:40;75,2;;;;;", {"lab.csv:2: Tank: is empty"}},
      {"N-07;02.03.2026 05:40;75.2;;;;;", {"Ni g/L: '75.2' holds a '.', and the decimal sign is ','"}},
      {"N-07;02.03.2026 05:40;1.075,2;;;;;", {"none between thousands"}},
      {"N-07;02.03.2026 05:40;75 g/L;;;;;", {"'75 g/L' is not a number; expected a number without its unit"}},
      {"N-07;02.03.2026 05:40;inf;;;;;", {"'inf' is not a number"}},
      {"N-07;02.03.2026 05:40;<0,1;;;;;", {"'<0,1' is a limit, not a value", "Leave the cell empty"}},
      {"N-07;02.03.2026 05:40;-3;;;;;", {"Ni g/L: \"-3 g/L\" is negative"}},
      {"N-07;02.03.2026 05:40;1e9;;;;;", {"Ni g/L: \"1e9 g/L\" cannot be right"}},
      {"N-07;02.03.2026 05:40;;;41;;;", {"pH: 41 cannot be a pH", "Check the decimal point."}},
      {"N-07;02.03.2026 05:40;;;;-300;;", {"Temp: "}},
      {"N-07;02.03.2026 05:40;;;;;0;", {"Volume: is zero"}},
      {"N-07;02.03.2026 05:40;;;;;;fine", {"lab.csv:2: holds nothing measured"}},
      {"N-07;02.03.2026 05:40;75", {"lab.csv:2: has 3 fields; expected 8, as there are headings"}},
      {"N-07;02.03.2026 05:40;75;;;;;a;b", {"has 9 fields", "Put a field in quotes that holds a semicolon."}},
      {"N-07;02.03.2026 05:40;75;;;;;\"a\"b", {"text stands behind a closing quote"}},
      {"N-07;02.03.2026 05:40;75;;;;;\"a", {"a quote is opened and not closed"}},
      {"N-07;gestern;75;;;;;", {"Sampled: 'gestern' is no date and time", "as 02.03.2026 05:40"}},
      {"N-07;;75;;;;;", {"Sampled: '' is no date and time"}},
      {"N-07;02.03.26 05:40;75;;;;;", {"has no year of four digits"}},
      {"N-07;2026-03-02 05:40;75;;;;;",
       {"does not have the order of the dates", "The columns say dates = \"d.m.y\""}},
      {"N-07;03.13.2026 05:40;75;;;;;", {"has a month 13", "The columns say"}},
      {"N-07;29.02.2026 05:40;75;;;;;", {"is no day of the calendar"}},
      {"N-07;02.03.2026;75;;;;;", {"has no time of day", "name the column"}},
      {"N-07;02.03.2026 24:00;75;;;;;", {"has no time of day from 0:00 to 23:59"}},
      {"N-07;02.03.2026 13:00 PM;75;;;;;", {"has no time of day"}},
      {"N-07;02.03.2026 05:40 Uhr;75;;;;;", {"goes on behind the time of day"}},
      {"N-07;02.03.1926 05:40;75;;;;;", {"is not between 1970 and 2037"}},
      {"N-07;29.03.2026 02:30;75;;;;;", {"never came: the clock of Europe/Berlin", "+01:00 or +02:00"}},
      {"N-07;25.10.2026 02:30;75;;;;;", {"came twice: the clock of Europe/Berlin", "+02:00 or +01:00"}},
      {";x;y;z;;;;", {"Tank: is empty", "Sampled: 'x'", "Ni g/L: 'y'", "Cl: 'z'"}},
  }));
  const std::string reasons = rejection(row.written);
  INFO(row.written << "\n" << reasons);
  for (const std::string& piece : row.pieces) CHECK_THAT(reasons, Catch::Contains(piece));
}

TEST_CASE("a stray quote costs its own row and no other", "[failure][shopfiles]") {
  const std::string good = ";02.03.2026 05:40;75,2;;;;;";
  const ImportedAnalyses imported =
      import_good(german_head + "A" + good + "\n" + "B" + good + "\"open\n" + "C" + good + "\n" + "D" + good +
                  "close\"\n" + "E" + good + "\"two\nlines\"\n" + "F" + good + "5\" pipe\n");
  std::string tanks;
  for (const ImportedAnalysis& analysis : imported.analyses) tanks += analysis.tank;
  CHECK(tanks == "ACDEF");
  REQUIRE(imported.rejected.size() == 1);
  CHECK(imported.rejected[0].line == 3);
  CHECK(imported.analyses.back().line == 8);  // E takes two lines
}

TEST_CASE("what an earlier row gave is reported and not given again", "[unit][shopfiles]") {
  const ImportedAnalyses imported =
      import_good(german_head +                            //
                  "N-07;02.03.2026 05:40;75,2;;4,1;;;\n"   //
                  "N-07;02.03.2026 05:40;75,20;;4,1;;;\n"  // all of it again
                  "N-07;02.03.2026 05:40;75,2;;4,2;;;\n"   // another pH
                  "N-08;02.03.2026 05:40;75,2;;;;;\n"      // another tank
                  "N-07;02.03.2026 05:41;75,2;;;;;\n"      // another time
                  "N-07;02.03.2026 05:40;75,3;;;;;\n");    // a second determination
  CHECK(imported.rows == 6);
  CHECK(imported.rejected.empty());
  REQUIRE(imported.analyses.size() == 5);
  CHECK(imported.analyses[1].line == 4);
  CHECK(imported.analyses[1].levels.empty());
  CHECK(imported.analyses[1].pH == 4.2);
  REQUIRE(imported.repeated.size() == 3);
  CHECK(imported.repeated[0].line == 3);
  CHECK(imported.repeated[0].first_line == 2);
  CHECK(imported.repeated[0].column == "Ni g/L");
  CHECK(imported.repeated[0].tank == "N-07");
  CHECK(imported.repeated[1].column == "pH");
  CHECK(imported.repeated[2].line == 4);
}

TEST_CASE("a file that cannot be read as a whole is refused with its mend", "[failure][shopfiles]") {
  CHECK_THAT(refusal(""), Catch::Contains("lab.csv: holds nothing"));
  CHECK_THAT(refusal("\n \n"), Catch::Contains("lab.csv: holds nothing"));
  CHECK_THAT(refusal("\xff\xfeT"), Catch::Contains("is written in UTF-16"));
  CHECK_THAT(refusal(german_head + "N-07;\xfc"), Catch::Contains("lab.csv:2: a letter that is not UTF-8"));
  CHECK_THAT(refusal(std::string("Tank\0", 5)), Catch::Contains("lab.csv:1: a zero byte"));
  CHECK_THAT(refusal("\"Tank;Sampled\n"), Catch::Contains("lab.csv:1: a quote is opened and not closed"));
  const std::string missing = refusal("Tank;Sample;Ni g/L;Cl;pH;pH;Temp;Volume\n");
  CHECK_THAT(missing,
             Catch::Contains("lab.csv:1: no column is headed 'Sampled'; expected one of Tank | Sample | "));
  CHECK_THAT(missing, Catch::Contains("Did you mean Sample?"));
  CHECK_THAT(missing, Catch::Contains("lab.csv:1: more than one column is headed 'pH'"));
  AnalysisColumns tabbed = german;
  tabbed.delimiter = '\t';
  CHECK_THAT(refusal(german_head, tabbed), Catch::Contains("no column is headed 'Tank'"));
  AnalysisColumns nonsense = german;
  nonsense.zone = "Nowhere";
  CHECK_THAT(refusal(german_head, nonsense), Catch::Contains("'Nowhere' is not known"));
  const auto split = csv_headings("lab.csv", "Ni, g/L;Cl, g/L;pH\n");
  REQUIRE_FALSE(split);
  CHECK_THAT(text(split.problems()), Catch::Contains("can be split in two ways"));
  CHECK(csv_headings("lab.csv", "Ni, g/L;Cl, g/L;pH\n", ';'));
  CHECK(csv_headings("lab.csv", "sep=;\nNi, g/L;Cl, g/L;pH\n"));
  CHECK_FALSE(import_analyses(TEST_DIR "/no-such.csv", german));
}

TEST_CASE("a file longer than a TOML file may be is read to its end", "[unit][shopfiles]") {
  const std::string path = TEST_CACHE "/long.csv";
  std::filesystem::create_directories(TEST_CACHE);
  std::ofstream file(path);
  file << german_head;
  constexpr int rows = 30'000;
  for (int i = 0; i < rows; ++i) file << "tank " << i << ";02.03.2026 05:40;75,2;;;;;a remark of no use\n";
  file.close();
  REQUIRE(std::filesystem::file_size(path) > (1 << 20));
  const auto imported = import_analyses(path, german);
  REQUIRE(imported);
  CHECK(imported->analyses.size() == rows);
  CHECK(imported->analyses.back().tank == "tank 29999");
}

namespace {

/// As a spreadsheet writes it: quotes where the text needs them.
std::string field(const std::string& text, char delimiter) {
  if (text.find_first_of(std::string("\"\r\n") + delimiter) == text.npos) return text;
  std::string quoted = "\"";
  for (const char c : text) quoted += c == '"' ? "\"\"" : std::string(1, c);
  return quoted + '"';
}

std::string number(double value, char decimal_sign) {
  char digits[40];
  std::string text(digits, std::to_chars(digits, digits + sizeof digits, value).ptr);
  std::ranges::replace(text, '.', decimal_sign);
  return text;
}

}  // namespace

TEST_CASE("10 000 rows written in any form read back as they were", "[property][shopfiles]") {
  const char delimiter = GENERATE(',', ';', '\t');
  const char decimal_sign = GENERATE('.', ',');
  constexpr std::uint32_t seed = 20260302;
  constexpr int rows = 10'000;
  INFO("delimiter '" << delimiter << "', decimal sign '" << decimal_sign << "', seed " << seed);
  std::mt19937 random(seed);
  const auto chance = [&](unsigned one_in) { return random() % one_in == 0; };
  const auto below = [&](double high) { return high * static_cast<double>(random()) / 4294967296.0; };

  AnalysisColumns columns = columns_of(decimal_sign, DateOrder::day_month_year);
  columns.quantities[1].unit = "g/L";  // so that no factor rounds
  const std::vector<std::string> tanks = {"N-07", "a;b,c", "\"quoted\"", "Nickel süß"};
  const std::vector<std::string> remarks = {
      "", "plain", "a, b; c\td", "two\nlines", "two\r\n\"lines\"", "5\" pipe"};
  std::string text;
  const auto write_row = [&](const std::vector<std::string>& fields, const char* line_end) {
    for (std::size_t i = 0; i < fields.size(); ++i)
      text += (i == 0 ? "" : std::string(1, delimiter)) + field(fields[i], delimiter);
    text += line_end;
  };
  write_row({"Remark", "Tank", "Sampled", "Ni g/L", "Cl", "pH", "Temp", "Volume"}, "\r\n");
  std::vector<ImportedAnalysis> written;
  std::vector<int> bad_rows;
  for (int i = 0; i < rows; ++i) {
    ImportedAnalysis row;
    row.tank = tanks[random() % tanks.size()];
    row.sampled = utc(2020, 1, 1, 0, 0) + minutes(i);  // no two are the same
    row.levels = {{"Ni^2+", {below(400)}}};
    if (chance(2)) row.levels.push_back({"Cl^-", {below(1e-3)}});
    if (chance(2)) row.pH = below(14);
    if (chance(2)) row.temperature = units::Celsius{below(99)};
    if (chance(2)) row.volume = units::Litres{1 + below(5000)};
    const bool is_bad = chance(50);
    const std::chrono::year_month_day date(std::chrono::floor<std::chrono::days>(row.sampled));
    const std::chrono::hh_mm_ss clock(row.sampled - std::chrono::floor<std::chrono::days>(row.sampled));
    char moment[40];
    std::snprintf(moment, sizeof moment, "%02u.%02u.%04d %02d:%02dZ", static_cast<unsigned>(date.day()),
                  static_cast<unsigned>(date.month()), static_cast<int>(date.year()),
                  static_cast<int>(clock.hours().count()), static_cast<int>(clock.minutes().count()));
    const auto cell = [&](std::optional<double> value) { return value ? number(*value, decimal_sign) : ""; };
    write_row(
        {remarks[random() % remarks.size()], row.tank, moment, is_bad ? "bad" : cell(row.levels[0].value.v),
         row.levels.size() > 1 ? cell(row.levels[1].value.v) : "", cell(row.pH),
         row.temperature ? cell(row.temperature->v) : "", row.volume ? cell(row.volume->v) : ""},
        chance(2) ? "\n" : "\r\n");
    if (is_bad)
      bad_rows.push_back(i);
    else
      written.push_back(row);
  }

  const ImportedAnalyses imported = import_good(text, columns);
  CHECK(imported.rows == rows);
  CHECK(imported.rejected.size() == bad_rows.size());
  CHECK(imported.repeated.empty());
  REQUIRE(imported.analyses.size() == written.size());
  for (std::size_t i = 0; i < written.size(); ++i) {
    const ImportedAnalysis &got = imported.analyses[i], &want = written[i];
    INFO("line " << got.line);
    REQUIRE(got.tank == want.tank);
    REQUIRE(got.sampled == want.sampled);
    REQUIRE(got.levels == want.levels);
    REQUIRE(got.pH == want.pH);
    REQUIRE(got.temperature == want.temperature);
    REQUIRE(got.volume == want.volume);
  }
}
