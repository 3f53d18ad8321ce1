// Writers as processes of their own, which tell over one pipe what was acknowledged to them and what was
// said.
#pragma once

#include <sys/types.h>

#include <filesystem>
#include <functional>
#include <string>
#include <vector>

#include "trial_log.hpp"

namespace faults {

/// A writer's end of the pipe. Every message is one write below PIPE_BUF: it arrives whole or not at all.
class Channel {
 public:
  explicit Channel(int pipe_end) : pipe_end_(pipe_end) {}
  /// To be called as soon as append has returned.
  void acknowledge(const logbook::Entry& entry) const;
  void say(const std::string& line) const;

 private:
  void send(const std::string& line) const;
  int pipe_end_;
};

struct Heard {
  Acknowledged acknowledged;
  std::vector<std::string> words;
  std::vector<int> statuses;  ///< exit status of each process; -1: killed
  std::int64_t doubled = 0;   ///< sequence numbers acknowledged twice
};

/// Processes that run until their work is done or they are killed. Throws std::runtime_error where the system
/// gives no process or pipe.
class Processes {
 public:
  using Work = std::function<int(int index, const Channel&)>;  ///< its value is the exit status
  Processes(int count, const Work& work);
  ~Processes();
  Processes(const Processes&) = delete;
  Processes& operator=(const Processes&) = delete;

  /// Wait until an entry has been acknowledged, until something has been said; or all have ended.
  void wait_for_entry();
  void wait_for_words();
  void kill_all();
  /// Hears them out.
  Heard finish();

 private:
  bool hear();
  std::vector<pid_t> running_;
  int pipe_end_ = -1;
  std::string unread_;
  Heard heard_;
};

/// A folder that goes away with the object; in memory where the trial is not about a real disk.
class Scratch {
 public:
  enum class Place { disk, memory };
  explicit Scratch(Place place = Place::disk);
  ~Scratch();
  Scratch(const Scratch&) = delete;
  Scratch& operator=(const Scratch&) = delete;
  std::filesystem::path operator/(const std::string& name) const { return path_ / name; }
  const std::filesystem::path& path() const { return path_; }

 private:
  std::filesystem::path path_;
};

}  // namespace faults
