#include "processes.hpp"

#include <stdlib.h>
#include <sys/wait.h>
#include <unistd.h>

#include <csignal>
#include <stdexcept>

namespace faults {

namespace fs = std::filesystem;

void Channel::acknowledge(const logbook::Entry& entry) const {
  send("ack " + std::to_string(entry.seq) + " " + entry.hash + "\n");
}

void Channel::say(const std::string& line) const { send("say " + line + "\n"); }

void Channel::send(const std::string& line) const {
  if (write(pipe_end_, line.data(), line.size()) != static_cast<ssize_t>(line.size())) _exit(99);
}

Processes::Processes(int count, const Work& work) {
  int ends[2];
  if (pipe(ends) != 0) throw std::runtime_error("no pipe");
  for (int index = 0; index < count; ++index) {
    const pid_t child = fork();
    if (child < 0) throw std::runtime_error("no process");
    if (child == 0) {
      close(ends[0]);
      _exit(work(index, Channel(ends[1])));
    }
    running_.push_back(child);
  }
  close(ends[1]);
  pipe_end_ = ends[0];
}

Processes::~Processes() {
  kill_all();
  for (const pid_t child : running_) waitpid(child, nullptr, 0);
  if (pipe_end_ >= 0) close(pipe_end_);
}

void Processes::kill_all() {
  for (const pid_t child : running_) kill(child, SIGKILL);
}

/// False at the end of the pipe.
bool Processes::hear() {
  char buffer[65536];
  const ssize_t size = read(pipe_end_, buffer, sizeof buffer);
  if (size <= 0) return false;
  unread_.append(buffer, static_cast<std::size_t>(size));
  for (std::size_t end = 0; (end = unread_.find('\n')) != std::string::npos; unread_.erase(0, end + 1)) {
    const std::string line = unread_.substr(4, end - 4);
    if (unread_.starts_with("say ")) {
      heard_.words.push_back(line);
    } else {
      const std::size_t space = line.find(' ');
      if (!heard_.acknowledged.emplace(std::stoll(line), line.substr(space + 1)).second) ++heard_.doubled;
    }
  }
  return true;
}

void Processes::wait_for_entry() {
  while (heard_.acknowledged.empty() && hear()) {
  }
}

void Processes::wait_for_words() {
  while (heard_.words.empty() && hear()) {
  }
}

Heard Processes::finish() {
  while (hear()) {
  }
  for (const pid_t child : running_) {
    int status = 0;
    waitpid(child, &status, 0);
    heard_.statuses.push_back(WIFEXITED(status) ? WEXITSTATUS(status) : -1);
  }
  running_.clear();
  return std::move(heard_);
}

Scratch::Scratch(Place place) {
  const fs::path memory = "/dev/shm";
  const bool in_memory = place == Place::memory && access(memory.c_str(), W_OK) == 0;
  std::string pattern = ((in_memory ? memory : fs::temp_directory_path()) / "durability-XXXXXX").string();
  if (!mkdtemp(pattern.data())) throw std::runtime_error("no folder " + pattern);
  path_ = pattern;
}

Scratch::~Scratch() {
  std::error_code ignored;
  fs::remove_all(path_, ignored);
}

}  // namespace faults
