// README.md and examples.toml of a bath type, and what a release must hold.
#include <unistd.h>

#include <algorithm>
#include <bathwright/conformance/conformance.hpp>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>

#include "brine.hpp"
#include "docs_page.hpp"

using namespace bathwright;
using conformance::Check;
using conformance::Group;
namespace fs = std::filesystem;

namespace {

const std::string good_page =
    "# Brine\n\n## Modelled\n\nNickel.\n\n## Not modelled\n\nAll else.\n\n## Limits\n\nFew.\n\n"
    "## Sources\n\n`a-book`\n\n## Hazards\n\nMany.\n";

std::string without(std::string text, const std::string& part) {
  text.erase(text.find(part), part.size());
  return text;
}

std::string faults_of(const std::string& page) {
  std::string faults;
  for (const Check& check : conformance::check_page(nickel_chloride_bath(), "README.md", page))
    for (const Problem& problem : check.problems) faults += problem.what + '\n';
  return faults;
}

/// A folder with a bath type's file in it, and its papers where they are given.
class Papers {
 public:
  Papers() : folder_(fs::temp_directory_path() / ("bathwright-papers-" + std::to_string(::getpid()))) {
    fs::remove_all(folder_);
    fs::create_directories(folder_ / "brine");
  }
  ~Papers() { fs::remove_all(folder_); }
  Papers(const Papers&) = delete;
  Papers& operator=(const Papers&) = delete;
  void write(const std::string& name, const std::string& content) const {
    std::ofstream(folder_ / "brine" / name) << content;
  }
  [[nodiscard]] std::vector<Check> checks(bool release,
                                          const bath::BathType& type = nickel_chloride_bath()) const {
    return conformance::check_papers(type, folder_ / "brine.bathtype.so", {release});
  }

 private:
  fs::path folder_;
};

long failed(const std::vector<Check>& checks) { return std::ranges::count_if(checks, &Check::failed); }

}  // namespace

TEST_CASE("a page with every heading and source is sound", "[unit][conformance]") {
  CHECK(faults_of(good_page).empty());
}

TEST_CASE("what a page lacks is named", "[failure][conformance]") {
  CHECK(faults_of(without(good_page, "## Limits\n\nFew.\n")) ==
        "nothing stands under a heading \"Limits\"\n");
  CHECK(faults_of(without(good_page, "Many.")) == "nothing stands under a heading \"Hazards\"\n");
  CHECK(faults_of(without(good_page, "`a-book`") + "`a-book`") ==
        "nothing stands under a heading \"Sources\"\nthe source 'a-book' is not cited under Sources\n");
}

TEST_CASE("papers that are not there fail a release and are skipped otherwise", "[unit][conformance]") {
  const Papers papers;
  for (const Check& check : papers.checks(false)) {
    CHECK_FALSE(check.passed());
    CHECK_FALSE(check.failed());
    CHECK_FALSE(check.skipped.empty());
  }
  CHECK(failed(papers.checks(true)) == 2);
}

TEST_CASE("sound papers pass, and a placeholder is refused only for a release", "[unit][conformance]") {
  const Papers papers;
  papers.write("README.md", good_page + "## Sources\n\n`placeholder` `a-book`\n");
  papers.write("examples.toml",
               "[[example]]\nname = 'brine'\ntemperature = '25 degC'\nvolume = '1 L'\npH = 4.0\n"
               "g_per_L = { 'Ni^2+' = 0.58693 }\n[[example.expect]]\nfigure = 'density'\nabove = 0.99\n"
               "from = 'salt is heavier than water'\n");
  CHECK(failed(papers.checks(false)) == 0);
  CHECK(failed(papers.checks(true)) == 0);
  bath::BathType type = nickel_chloride_bath();
  type.sources.push_back({"placeholder", "still to be found", ""});
  CHECK(failed(papers.checks(false, type)) == 0);
  const auto release = papers.checks(true, type);
  CHECK(failed(release) == 1);
  CHECK(release[0].group == Group::tables);
  CHECK(release[0].failed());
}

TEST_CASE("examples that cannot be read are a failure", "[failure][conformance]") {
  const Papers papers;
  papers.write("examples.toml", "[[example]");
  CHECK(failed(papers.checks(false)) == 1);
}
