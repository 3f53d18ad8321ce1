#include "print_command.hpp"

#include <fcntl.h>
#include <spawn.h>
#include <sys/wait.h>
#include <unistd.h>

#include <array>
#include <cerrno>
#include <csignal>
#include <cstring>
#include <optional>
#include <thread>

extern char** environ;

namespace bathwright::work {
namespace {

/// A file that has no name: what a command says, without waiting for who holds its other end.
class Said {
 public:
  Said()
      : file_(
            ::open((std::filesystem::temp_directory_path()).c_str(), O_TMPFILE | O_RDWR | O_CLOEXEC, 0600)) {}
  ~Said() {
    if (file_ >= 0) ::close(file_);
  }
  Said(const Said&) = delete;
  Said& operator=(const Said&) = delete;

  [[nodiscard]] int file() const { return file_; }
  [[nodiscard]] std::string first_line() const {
    std::array<char, 400> text{};
    const ssize_t length = file_ < 0 ? 0 : ::pread(file_, text.data(), text.size(), 0);
    const std::string all(text.data(), length > 0 ? static_cast<std::size_t>(length) : 0);
    return all.substr(0, all.find('\n'));
  }

 private:
  int file_;
};

/// Its status once it has ended; nothing where that takes too long.
std::optional<int> ended(pid_t child, std::chrono::milliseconds patience) {
  using namespace std::chrono_literals;
  const auto until = std::chrono::steady_clock::now() + patience;
  int status = 0;
  while (::waitpid(child, &status, WNOHANG) == 0) {
    if (std::chrono::steady_clock::now() > until) {
      ::kill(child, SIGKILL);
      ::waitpid(child, &status, 0);
      return std::nullopt;
    }
    std::this_thread::sleep_for(20ms);
  }
  return status;
}

}  // namespace

std::vector<std::string> print_words(const std::string& command, const std::filesystem::path& file) {
  std::vector<std::string> words;
  bool quoted = false, begun = false, named = false;
  for (const char c : command) {
    if (c == '"') {
      quoted = !quoted;
      if (!begun) words.emplace_back(), begun = true;
    } else if (c == ' ' && !quoted) {
      begun = false;
    } else {
      if (!begun) words.emplace_back(), begun = true;
      words.back() += c;
    }
  }
  if (words.empty()) return words;
  constexpr std::string_view place = "{file}";
  for (std::string& word : words)
    if (const std::size_t at = word.find(place); at != std::string::npos) {
      word.replace(at, place.size(), file.string());
      named = true;
    }
  if (!named) words.push_back(file.string());
  return words;
}

Outcome print_file(const std::string& command, const std::filesystem::path& file,
                   std::chrono::milliseconds patience) {
  std::vector<std::string> words = print_words(command, file);
  if (words.empty())
    return Problem{Fault::bad_input, "print command", "is empty", "a program that prints, as lp",
                   "Settings has it."};
  const auto failed = [&](std::string what) {
    return Problem{Fault::io, command, std::move(what), "",
                   "Print " + file.string() + " another way, or change the print command in the settings."};
  };
  std::vector<char*> raw;
  for (std::string& word : words) raw.push_back(word.data());
  raw.push_back(nullptr);
  const Said said;
  posix_spawn_file_actions_t actions;
  posix_spawn_file_actions_init(&actions);
  posix_spawn_file_actions_addopen(&actions, STDIN_FILENO, "/dev/null", O_RDONLY, 0);
  posix_spawn_file_actions_addopen(&actions, STDOUT_FILENO, "/dev/null", O_WRONLY, 0);
  if (said.file() >= 0) posix_spawn_file_actions_adddup2(&actions, said.file(), STDERR_FILENO);
  pid_t child = 0;
  const int error = ::posix_spawnp(&child, raw.front(), &actions, nullptr, raw.data(), environ);
  posix_spawn_file_actions_destroy(&actions);
  if (error != 0) return failed(std::string("could not be started: ") + std::strerror(error));
  const auto status = ended(child, patience);
  if (!status) return failed("did not end and was stopped");
  if (WIFEXITED(*status) && WEXITSTATUS(*status) == 0) return Done{};
  const std::string line = said.first_line();
  return failed((WIFEXITED(*status) ? "ended with status " + std::to_string(WEXITSTATUS(*status))
                                    : "was ended by signal " + std::to_string(WTERMSIG(*status))) +
                (line.empty() ? "" : ": " + line));
}

}  // namespace bathwright::work
