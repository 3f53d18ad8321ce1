// A page as a PDF, read back with the tools of poppler.
#include <unistd.h>

#include <array>
#include <bathwright/sheets/page_pdf.hpp>
#include <catch2/catch.hpp>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <sstream>

using namespace bathwright::sheets;

namespace {

std::string output_of(const std::string& command) {
  std::string out;
  std::FILE* pipe = ::popen(command.c_str(), "r");
  REQUIRE(pipe);
  std::array<char, 4096> part{};
  while (const std::size_t got = std::fread(part.data(), 1, part.size(), pipe)) out.append(part.data(), got);
  ::pclose(pipe);
  return out;
}

/// What poppler reads of a PDF.
struct Read {
  std::string facts;               ///< "Pages: 2 ... Page size: ..."
  std::vector<std::string> pages;  ///< the words of each
};

Read read(const Page& page, Paper paper) {
  const auto pdf = pdf_of(page, paper);
  REQUIRE(pdf);
  const auto file = std::filesystem::temp_directory_path() / ("page-" + std::to_string(::getpid()) + ".pdf");
  std::ofstream(file, std::ios::binary) << *pdf;
  Read read;
  read.facts = output_of(PDFINFO " '" + file.string() + "'");
  std::istringstream text(output_of(PDFTOTEXT " -layout '" + file.string() + "' -"));
  for (std::string one; std::getline(text, one, '\f');) read.pages.push_back(one);
  std::filesystem::remove(file);
  return read;
}

bathwright::charts::Chart chart_of(const std::string& title) {
  bathwright::charts::Chart chart;
  chart.title = title;
  chart.unit = "g/L";
  chart.x_title = "day";
  chart.lines = {{"", bathwright::charts::Meaning::predicted, {0, 10, 20}, {1, 2, 4}}};
  return chart;
}

Section of(std::string heading, std::vector<Block> blocks, Reading reading = Reading::working) {
  return {std::move(heading), std::move(blocks), reading};
}

Task step(int number) {
  const std::string n = std::to_string(number);
  return {n + ". 5 kg salt", "done ____ by ______", {"too much " + n}, {"slowly " + n, "then wait " + n}};
}

Page short_page() {
  Table table({{"g/L"}, {"found", Align::number}});
  table.add({"NiSO₄·6H₂O", "263.4"});
  table.add({"Ni²⁺", "58.9"});
  return {"N-07",
          "Slip 3",
          {of("", {Fields{{"Limits", "revision C"}, {"", "owner"}}, Stop{"wait"}}), of("Levels", {table}),
           of("Order", {step(1)}), of("Cautions", {Paragraph{"no dust"}}, Reading::small_print),
           of("Other plans", {Paragraph{"none"}}, Reading::background),
           of("", {SignatureLines{{"prepared", "M. Okafor"}, {"approved", ""}, {"witness", ""}}})}};
}

std::size_t count(const std::string& text, const std::string& part) {
  std::size_t n = 0;
  for (auto at = text.find(part); at != std::string::npos; at = text.find(part, at + 1)) ++n;
  return n;
}

}  // namespace

TEST_CASE("a PDF says what the page says, on the paper asked for", "[unit][sheets]") {
  for (const auto& [paper, size] :
       {std::pair{Paper::a4, "595.276 x 841.89 pts (A4)"}, {Paper::letter, "612 x 792 pts (letter)"}}) {
    const Read got = read(short_page(), paper);
    CHECK_THAT(got.facts, Catch::Contains(size) && Catch::Contains("N-07, Slip 3"));
    REQUIRE(got.pages.size() == 1);
    for (const char* words : {"N-07", "Slip 3", "Limits", "revision C  •  owner", "STOP wait", "NiSO₄·6H₂O",
                              "263.4", "Ni²⁺", "1. 5 kg salt", "STOP too much 1", "slowly 1  •  then wait 1",
                              "no dust", "Other plans", "M. Okafor", "approved", "page 1 of 1"}) {
      INFO(words);
      std::string squeezed;  // poppler sets as many spaces as it sees fit
      for (const char c : got.pages[0])
        if (c != ' ' || squeezed.empty() || squeezed.back() != ' ') squeezed += c;
      std::string wanted;
      for (const char c : std::string(words))
        if (c != ' ' || wanted.empty() || wanted.back() != ' ') wanted += c;
      CHECK_THAT(squeezed, Catch::Contains(wanted));
    }
    // What is background comes behind what is signed.
    CHECK(got.pages[0].find("M. Okafor") < got.pages[0].find("Other plans"));
  }
}

TEST_CASE("no task is parted from its lines, and every page has title and number", "[unit][sheets]") {
  std::vector<Block> steps;
  for (int i = 101; i <= 199; ++i) steps.emplace_back(step(i));
  for (const Paper paper : {Paper::a4, Paper::letter}) {
    const Read got = read({"N-07", "Slip 3", {of("Order", steps)}}, paper);
    REQUIRE(got.pages.size() > 2);
    std::size_t seen = 0;
    for (std::size_t p = 0; p < got.pages.size(); ++p) {
      const std::string& text = got.pages[p];
      CHECK(count(text, "N-07") == 2);
      CHECK_THAT(
          text, Catch::Contains("page " + std::to_string(p + 1) + " of " + std::to_string(got.pages.size())));
      CHECK(count(text, "5 kg salt") == count(text, "then wait"));
      CHECK(count(text, "5 kg salt") == count(text, "too much"));
      seen += count(text, "5 kg salt");
    }
    CHECK(seen == steps.size());
  }
}

TEST_CASE("a table that goes on has its head again, in columns too", "[unit][sheets]") {
  Table table({{"number", Align::number}, {"remark"}});
  for (int i = 1000; i < 1300; ++i) table.add({std::to_string(i), "row"});
  for (const Reading reading : {Reading::working, Reading::small_print}) {
    const Read got = read({"N-07", "Slip 3", {of("Long", {table}, reading)}}, Paper::a4);
    REQUIRE(got.pages.size() > 1);
    std::size_t rows = 0;
    for (const std::string& text : got.pages) {
      CHECK(count(text, "remark") == (reading == Reading::working ? 1 : 2));
      rows += count(text, "row");
    }
    CHECK(rows == 300);
  }
}

TEST_CASE("what is higher than a page is made smaller, not cut off", "[unit][sheets]") {
  std::string endless;
  for (int i = 0; i < 3000; ++i) endless += "word ";
  const Read got = read({"N-07", "Slip 3", {of("Long", {Paragraph{endless + "end."}})}}, Paper::a4);
  CHECK_THAT(got.pages.back(), Catch::Contains("end."));
}

TEST_CASE("paper has two names", "[failure][sheets]") {
  CHECK(*paper_of("letter") == Paper::letter);
  CHECK_FALSE(paper_of("A5"));
}

TEST_CASE("charts stand on the sheet with their titles, two beside each other", "[unit][sheets]") {
  Page page = short_page();
  page.add(of("Day by day", {Charts{{chart_of("aluminium"), chart_of("sulfate"), chart_of("chloride")}}}));
  const Read pdf = read(page, Paper::a4);
  REQUIRE(pdf.pages.size() == 1);
  for (const char* title : {"aluminium", "sulfate", "chloride"})
    CHECK_THAT(pdf.pages[0], Catch::Contains(title));
  CHECK_THAT(pdf.pages[0], Catch::Matches("[^]*aluminium[^\n]*sulfate[^]*"));
  CHECK_THAT(html_of(page), Catch::Contains("<svg") && !Catch::Contains("<?xml"));
}

TEST_CASE("a sheet on the screen has the pages of the PDF, black on white", "[unit][sheets]") {
  Page page = short_page();
  constexpr int enough_for_two = 60;
  for (int i = 1; i <= enough_for_two; ++i) page.add(of("", {step(i)}));
  const auto pictures = pictures_of(page, Paper::letter, 72);
  REQUIRE(pictures);
  CHECK(pictures->size() == read(page, Paper::letter).pages.size());
  for (const Picture& picture : *pictures) {
    CHECK(picture.width == 612);
    CHECK(picture.height == 792);
    REQUIRE(picture.rgba.size() == 4U * 612 * 792);
    CHECK(picture.rgba[0] == 0xFF);
    int dark = 0;
    for (std::size_t i = 0; i < picture.rgba.size(); i += 4) {
      dark += picture.rgba[i] < 0x60 && picture.rgba[i + 1] < 0x60 ? 1 : 0;
      if (picture.rgba[i + 3] != 0xFF) FAIL("not opaque");
    }
    CHECK(dark > 500);
  }
}
