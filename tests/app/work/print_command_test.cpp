#include <unistd.h>

#include <catch2/catch.hpp>
#include <fstream>

#include "work/print_command.hpp"

using namespace bathwright;
using work::print_file;
using work::print_words;
using Words = std::vector<std::string>;

TEST_CASE("a print command is words, the file where it is asked for or last", "[unit][work]") {
  CHECK(print_words("lp", "/shop/slip 3.pdf") == Words{"lp", "/shop/slip 3.pdf"});
  CHECK(print_words("lp -d line7  -n 2", "s.pdf") == Words{"lp", "-d", "line7", "-n", "2", "s.pdf"});
  CHECK(print_words("cp {file} /tmp", "s.pdf") == Words{"cp", "s.pdf", "/tmp"});
  CHECK(print_words("lp -t \"N 07\" --in={file}", "s.pdf") == Words{"lp", "-t", "N 07", "--in=s.pdf"});
  CHECK(print_words("lp \"\"", "s.pdf") == Words{"lp", "", "s.pdf"});
  CHECK(print_words("  ", "s.pdf").empty());
}

TEST_CASE("no shell reads the command or the file's name", "[failure][work]") {
  const auto folder = std::filesystem::temp_directory_path() / ("print-" + std::to_string(::getpid()));
  std::filesystem::create_directories(folder);
  const auto odd = folder / "a; touch owned $(touch owned).pdf";
  std::ofstream(odd) << "sheet";
  CHECK(print_file("cp {file} " + (folder / "copy").string(), odd));
  CHECK(std::filesystem::file_size(folder / "copy") == 5);
  CHECK_FALSE(std::filesystem::exists("owned"));
  std::filesystem::remove_all(folder);
}

TEST_CASE("what keeps it from printing is told in words", "[failure][work]") {
  const auto said = [](const Outcome& outcome) { return outcome ? "" : text(outcome.problems()); };
  CHECK_THAT(said(print_file("", "s.pdf")), Catch::Contains("is empty"));
  CHECK_THAT(said(print_file("no-such-printer -d x", "s.pdf")), Catch::Contains("could not be started"));
  CHECK_THAT(said(print_file("false", "s.pdf")), Catch::Contains("ended with status 1"));
  CHECK_THAT(said(print_file("ls /no/such/folder", "s.pdf")), Catch::Contains("No such file"));
  CHECK_THAT(said(print_file("sleep 20 {file}", "0", std::chrono::milliseconds(200))),
             Catch::Contains("did not end and was stopped"));
  CHECK(print_file("true", "s.pdf"));
}
