#include <algorithm>
#include <bathwright/sheets/page.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::sheets;

namespace {

template <class... Blocks>
Section section(std::string heading, Blocks... blocks) {
  Section made{std::move(heading), {}};
  (made.blocks.emplace_back(std::move(blocks)), ...);
  return made;
}

Page example() {
  Table table({{"after", Align::number}, {"H<b>"}});
  table.add({"1", "\"x\" & y"});
  Page page{"N-07", "Slip 3", {}};
  page.add(section("", Fields{{"Limits", "revision C"}, {"", std::string(100, 'x') + " end"}}));
  page.add(section("Steps", Stop{"wait"}, Task{"1. salt", "done ___", {"too much"}, {"slowly"}}, table));
  page.add(section("Left out"));
  page.add(section("", SignatureLines{{"prepared", "M. Okafor"}, {"approved", ""}, {"witness", ""}}));
  return page;
}

bool has(const Lines& lines, const std::string& line) {
  return std::ranges::find(lines, line) != lines.end();
}

}  // namespace

TEST_CASE("a page as text fits its width and leaves room to sign", "[unit][sheets]") {
  const Lines lines = text_of(example());
  for (const std::string& line : lines) CHECK(columns(line) <= width);
  CHECK(has(lines, "Limits  revision C"));
  CHECK(has(lines, "   STOP too much"));
  CHECK(has(lines, "   slowly"));
  CHECK(has(lines, "prepared M. Okafor                      approved _____________________________"));
  CHECK(has(lines, "witness  _____________________________"));
  CHECK(std::ranges::none_of(lines, [](const auto& line) { return line.starts_with("Left out"); }));
}

TEST_CASE("a page as HTML has everything the text has, escaped", "[unit][sheets]") {
  const std::string html = html_of(example());
  for (const char* part :
       {"<h1>N-07</h1>", "<dt>Limits</dt><dd>revision C</dd>", "<h2>Steps</h2>", "<b>STOP</b> too much",
        "<th>H&lt;b&gt;</th>", "<td class=\"number\">1</td>", "&quot;x&quot; &amp; y", "M. Okafor"})
    CHECK_THAT(html, Catch::Contains(part));
  CHECK_THAT(html, !Catch::Contains("Left out"));
}
