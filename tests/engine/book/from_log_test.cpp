// The book of a tank out of a real log file.
#include <stdlib.h>

#include <bathwright/book/from_log.hpp>
#include <filesystem>

#include "../../support/demo_tank.hpp"

using namespace demo;
using logbook::EntryKind;
using std::chrono::hours;

namespace {

/// Tank N-07's log on 2 March 2026, in UTC.
struct Log final : logbook::Clock {
  std::filesystem::path folder;
  logbook::UtcTime now = std::chrono::sys_days(std::chrono::year(2026) / 3 / 2) + hours(6);
  std::optional<logbook::Logbook> log;

  Log() {
    std::string pattern = (std::filesystem::temp_directory_path() / "book-XXXXXX").string();
    REQUIRE(mkdtemp(pattern.data()) != nullptr);
    folder = pattern;
    log.emplace(must(logbook::Logbook::open(folder / "shop.log", logbook::OpenMode::create, *this)));
  }
  ~Log() override { std::filesystem::remove_all(folder); }
  Log(const Log&) = delete;
  Log& operator=(const Log&) = delete;
  logbook::UtcTime utc_now() const override { return now; }

  std::int64_t write(EntryKind kind, const std::string& body, std::optional<std::int64_t> about = {}) {
    now += hours(1);
    logbook::NewEntry entry;
    entry.kind = kind;
    entry.tank = tank().name;
    entry.by = "M. Okafor";
    entry.body = body;
    entry.about = about;
    return must(log->append(entry)).seq;
  }
  std::int64_t analysis(double boric_acid, const std::string& more = "") {
    return write(EntryKind::analysis, R"({"volume_L":2400,"temperature_C":55,"pH":4.2,"results":[)"
                                      R"({"quantity":"Ni^2+","value":75,"unit":"g/L","from":"titration"},)"
                                      R"({"quantity":"Cl^-","value":15,"unit":"g/L","from":"titration"},)"
                                      R"({"quantity":"H3BO3","value":)" +
                                          std::to_string(boric_acid) +
                                          R"(,"unit":"g/L","from":"titration"}])" + more + "}");
  }
  std::optional<book::FromLog> book(const std::string& sampled = "") const {
    return must(book::from_log(*log, std::nullopt, tank(), chemistry(), {"today", sampled, now}));
  }
  double boric_acid_kg(const std::string& sampled = "") const {
    const auto found = book(sampled);
    REQUIRE(found);
    const auto& names = chemistry().components();
    const auto i = static_cast<std::size_t>(std::find(names.begin(), names.end(), "H3BO3") - names.begin());
    return found->book.carried->component_mol[i] * 0.06183;
  }
};

}  // namespace

TEST_CASE("the book starts from the last analysis and counts what came after", "[unit]") {
  Log shop;
  CHECK_FALSE(shop.book());
  shop.analysis(40);
  const double before = shop.boric_acid_kg();
  CHECK(before == Approx(96).epsilon(0.01));
  shop.write(EntryKind::addition, R"({"note":"10 kg boric acid"})");
  CHECK(shop.boric_acid_kg() - before == Approx(9.95).epsilon(0.01));
  shop.write(EntryKind::note, R"({"note":"5 kg boric acid ordered"})");
  CHECK(shop.boric_acid_kg() - before == Approx(9.95).epsilon(0.01));
}

TEST_CASE("a corrected entry counts as its correction says", "[unit]") {
  Log shop;
  shop.analysis(40);
  const double before = shop.boric_acid_kg();
  const auto wrong = shop.write(EntryKind::addition, R"({"note":"10 kg boric acid"})");
  shop.write(EntryKind::correction, R"({"reason":"misread","note":"4 kg boric acid"})", wrong);
  CHECK(shop.boric_acid_kg() - before == Approx(3.98).epsilon(0.02));
  shop.write(EntryKind::correction, R"({"reason":"other tank"})", wrong);
  CHECK(shop.boric_acid_kg() == Approx(before).epsilon(0.001));
  CHECK_THAT(shop.book()->book.carried->not_counted.at(0), Catch::Contains("corrected by 4"));
}

TEST_CASE("what was done after the sample is not in its book", "[unit]") {
  Log shop;
  shop.analysis(40);                                                  // 07:00
  shop.write(EntryKind::addition, R"({"note":"10 kg boric acid"})");  // 08:00
  shop.write(EntryKind::addition, R"({"note":"20 kg boric acid"})");  // 09:00
  CHECK(shop.boric_acid_kg("2026-03-02T08:30:00") == Approx(96 + 9.95).epsilon(0.01));
  CHECK_THAT(shop.book("2026-03-02T08:30:00")->after_sample.at(0), Catch::Contains("entry 3 (addition)"));
  CHECK_FALSE(shop.book("2026-03-02T06:30:00"));  // before anything was known
}

TEST_CASE("an analysis that did not fit is no start, a second one is", "[unit]") {
  Log shop;
  shop.analysis(40);
  const std::string alarm = R"(,"misfit":{"alarm":true})";
  shop.analysis(20, alarm);
  CHECK(shop.boric_acid_kg() == Approx(96).epsilon(0.02));
  CHECK_THAT(shop.book()->book.carried->not_counted.at(0), Catch::Contains("entry 2"));
  shop.analysis(20, alarm);
  CHECK(shop.boric_acid_kg() == Approx(48).epsilon(0.02));
}

TEST_CASE("the amounts and the covariance an analysis states are where the book starts", "[unit]") {
  Log shop;
  const bath::TankState made_up = state(280, 50, 42);
  const std::size_t n = made_up.component_mol.size();
  std::string mol, covariance, names;
  for (std::size_t i = 0; i < n; ++i) {
    mol += (i ? "," : "") + std::to_string(made_up.component_mol[i]);
    names += std::string(i ? "," : "") + '"' + chemistry().components()[i] + '"';
    for (std::size_t j = 0; j < n; ++j) covariance += (i + j ? "," : "") + std::string(i == j ? "4" : "0");
  }
  shop.analysis(42, ",\"tank_state\":{\"components\":[" + names + "],\"component_mol\":[" + mol +
                        "],\"water_kg\":2000,\"covariance_mol2\":[" + covariance + "]}");
  const auto told = must(shop.log->list({}));
  const auto start = book::start_of(told.at(0), chemistry());
  REQUIRE(start);
  CHECK(start->state.water_kg == 2000);
  CHECK(start->covariance[0] == 4);
  CHECK(start->found.at("H3BO3") == 42);
}
