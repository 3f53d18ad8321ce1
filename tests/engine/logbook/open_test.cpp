// Every way in which a log cannot be opened or written says which one it is.
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <fstream>
#include <functional>

#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

namespace fs = std::filesystem;

void write_file(const fs::path& path, const std::string& bytes) {
  std::ofstream(path, std::ios::binary) << bytes;
}

void make_log(const fs::path& path) {
  const HeldClock clock;
  must(must(Logbook::open(path, OpenMode::create, clock)).append(note()));
}

std::vector<std::string> files_in(const fs::path& folder) {
  std::vector<std::string> names;
  for (const auto& file : fs::directory_iterator(folder)) names.push_back(file.path().filename().string());
  std::sort(names.begin(), names.end());
  return names;
}

/// The words `work` gives back when done by a user without rights: permissions do not bind root.
std::string as_ordinary_user(const std::function<std::string()>& work) {
  int ends[2];
  REQUIRE(pipe(ends) == 0);
  const pid_t child = fork();
  REQUIRE(child >= 0);
  if (child == 0) {
    constexpr unsigned nobody = 65534;
    if (geteuid() == 0 && (setgid(nobody) != 0 || setuid(nobody) != 0)) _exit(1);
    const std::string words = work();
    _exit(write(ends[1], words.data(), words.size()) == static_cast<ssize_t>(words.size()) ? 0 : 1);
  }
  close(ends[1]);
  std::string words;
  char buffer[4096];
  for (ssize_t n = 0; (n = read(ends[0], buffer, sizeof buffer)) > 0;)
    words.append(buffer, static_cast<std::size_t>(n));
  close(ends[0]);
  int status = 0;
  REQUIRE(waitpid(child, &status, 0) == child);
  REQUIRE(status == 0);
  return words;
}

/// Takes write permission from a path and gives it back.
class WriteProtected {
 public:
  explicit WriteProtected(fs::path path) : path_(std::move(path)), before_(fs::status(path_).permissions()) {
    constexpr auto read = fs::perms::owner_read | fs::perms::group_read | fs::perms::others_read;
    constexpr auto enter = fs::perms::owner_exec | fs::perms::group_exec | fs::perms::others_exec;
    fs::permissions(path_, fs::is_directory(path_) ? read | enter : read);
  }
  ~WriteProtected() { fs::permissions(path_, before_); }
  WriteProtected(const WriteProtected&) = delete;
  WriteProtected& operator=(const WriteProtected&) = delete;

 private:
  fs::path path_;
  fs::perms before_;
};

}  // namespace

TEST_CASE("what cannot be opened says why, and is left as it was", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  write_file(folder / "letter.txt", std::string(8192, 'x'));
  write_file(folder / "empty.log", "");
  fs::create_directory(folder / "sub");
  RawDatabase(folder / "other.db").execute("CREATE TABLE stock (x)");
  make_log(folder / "newer.log");
  RawDatabase(folder / "newer.log").execute("PRAGMA user_version = 3");
  make_log(folder / "zero.log");
  RawDatabase(folder / "zero.log").execute("PRAGMA user_version = 0");

  struct Row {
    const char* file;
    OpenMode mode;
    Fault kind;
    std::string what;
  };
  const auto create = OpenMode::create, read_write = OpenMode::read_write, read_only = OpenMode::read_only;
  const std::vector<Row> rows{
      {"no/shop.log", create, Fault::io, "the folder " + (folder / "no").string() + " does not exist"},
      {"letter.txt/shop.log", create, Fault::io,
       (folder / "letter.txt").string() + " is a file, not a folder"},
      {"sub", create, Fault::io, "this is a folder, not a logbook file"},
      {"none.log", read_write, Fault::io, "there is no such file"},
      {"none.log", read_only, Fault::io, "there is no such file"},
      {"letter.txt", create, Fault::bad_input, "this file is not a logbook"},
      {"letter.txt", read_only, Fault::bad_input, "this file is not a logbook"},
      {"empty.log", read_write, Fault::bad_input, "the file is empty"},
      {"empty.log", read_only, Fault::bad_input, "the file is empty"},
      {"other.db", create, Fault::bad_input, "this is a database of another program"},
      {"newer.log", create, Fault::refused, "the logbook has format version 3"},
      {"newer.log", read_only, Fault::refused, "the logbook has format version 3"},
      {"zero.log", create, Fault::refused, "the logbook has format version 0"},
  };
  const auto before = files_in(folder.path());
  for (const Row& row : rows) {
    INFO(row.file << ": " << row.what);
    const auto opened = Logbook::open(folder / row.file, row.mode, clock);
    REQUIRE_FALSE(opened);
    const Problem& problem = opened.problems()[0];
    CHECK(problem.kind == row.kind);
    CHECK(problem.where == (folder / row.file).string());
    CHECK(problem.what == row.what);
    CHECK_FALSE(problem.try_this.empty());
  }
  CHECK(files_in(folder.path()) == before);
}

TEST_CASE("reading leaves the folder as it was and appends nothing", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  make_log(folder / "shop.log");
  {
    auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
    CHECK(must(log.list()).size() == 1);
    const auto refused = log.append(note());
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].kind == Fault::refused);
    CHECK(log.verify().entries == 1);
  }
  CHECK(files_in(folder.path()) == std::vector<std::string>{"shop.log"});
}

TEST_CASE("a name that would mean something in a URI is only a name", "[unit][logbook]") {
  const TempFolder folder;
  make_log(folder / "50%41 of line #1?mode=memory.log");
  CHECK(files_in(folder.path()) == std::vector<std::string>{"50%41 of line #1?mode=memory.log"});
}

TEST_CASE("opening with create again keeps what is there", "[unit][logbook]") {
  const TempFolder folder;
  make_log(folder / "shop.log");
  make_log(folder / "shop.log");
  const HeldClock clock;
  CHECK(must(must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock)).list()).size() == 2);
}

TEST_CASE("a logbook moved into another variable goes on", "[unit][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  Logbook other = std::move(log);
  CHECK(must(other.append(note())).seq == 1);
  log = std::move(other);
  CHECK(must(log.append(note())).seq == 2);
}

TEST_CASE("without permission to write, a log can be read but not written", "[failure][logbook]") {
  const TempFolder folder;
  make_log(folder / "shop.log");
  const WriteProtected protected_folder(folder.path());
  const HeldClock clock;
  const auto outcome = [&](const char* file, OpenMode mode) {
    return as_ordinary_user([&] {
      const auto log = Logbook::open(folder / file, mode, clock);
      if (!log) return log.problems()[0].what;
      const auto entries = log->list();
      return entries ? "read " + std::to_string(entries->size()) : entries.problems()[0].what;
    });
  };
  using Catch::Matchers::StartsWith;
  CHECK_THAT(outcome("new.log", OpenMode::create), StartsWith("the file or its folder may not be written"));
  {
    const WriteProtected protected_file(folder / "shop.log");
    CHECK(outcome("shop.log", OpenMode::read_write) == "the file may be read but not written");
    CHECK(outcome("shop.log", OpenMode::read_only) == "read 1");
  }
  fs::permissions(folder / "shop.log", fs::perms::all);
  CHECK_THAT(outcome("shop.log", OpenMode::read_write),
             StartsWith("the file or its folder may not be written"));
  CHECK(outcome("shop.log", OpenMode::read_only) == "read 1");
}

TEST_CASE("a locked log is waited for, then named as locked", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  make_log(folder / "shop.log");
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_write, clock,
                                {.wait = std::chrono::milliseconds(50)}));
  RawDatabase other(folder / "shop.log");
  other.execute("BEGIN IMMEDIATE");
  const auto refused = log.append(note());
  REQUIRE_FALSE(refused);
  CHECK(refused.problems()[0].what == "another program has held the logbook locked for 0.05 s");
  other.execute("ROLLBACK");
  CHECK(must(log.append(note())).seq == 2);
}

TEST_CASE("a damaged file is named as damaged", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  make_log(folder / "shop.log");
  constexpr std::streamoff page = 4096;
  {
    std::fstream file(folder / "shop.log", std::ios::in | std::ios::out | std::ios::binary);
    file.seekp(page);
    file << std::string(page, '\xA5');
  }
  const auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
  const auto entries = log.list();
  REQUIRE_FALSE(entries);
  CHECK(entries.problems()[0].kind == Fault::inconsistent_data);
  CHECK_THAT(entries.problems()[0].what, Catch::Matchers::StartsWith("the file is damaged"));
  CHECK_FALSE(log.verify().ok);
}
