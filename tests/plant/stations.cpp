#include "stations.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <signal.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <atomic>
#include <cstring>
#include <fstream>
#include <iterator>
#include <map>
#include <random>
#include <thread>

#include "server.hpp"
#include "support.hpp"

namespace plant_test {
namespace {

using std::chrono::duration_cast;
using std::chrono::microseconds;
using std::chrono::milliseconds;
using std::chrono::steady_clock;

std::int64_t now_us() { return duration_cast<microseconds>(steady_clock::now().time_since_epoch()).count(); }

/// What a station notes the moment append or send has returned; written in one piece, so that a kill leaves
/// whole records only.
struct Record {
  bool arrived = false;  ///< else acknowledged
  std::int64_t seq = 0;  ///< arrived: up to this one
  std::int64_t began_us = 0, ended_us = 0;
  char hash[64] = {};
};

/// One station: its log, its notes, its process.
class StationProcess {
 public:
  StationProcess(const TempFolder& folder, int number, plant::Connection connection)
      : name_(fmt::format("line-{}", number)),
        log_(folder / (name_ + ".sqlite")),
        notes_(folder / (name_ + ".notes")),
        words_(folder / (name_ + ".words")),
        connection_(std::move(connection)) {}

  void start(double entries_a_second, milliseconds time) {
    process_ = fork();
    if (process_ == 0) _exit(work(entries_a_second, time));
  }
  void kill() {
    ::kill(process_, SIGKILL);
    wait();
  }
  void wait() const { waitpid(process_, nullptr, 0); }

  [[nodiscard]] logbook::Logbook log() const { return open_log(log_, name_); }
  [[nodiscard]] plant::Station station() const { return plant::Station(connection_); }
  [[nodiscard]] std::string words() const {
    std::ifstream in(words_);
    std::string line;
    std::getline(in, line);
    return line;
  }
  [[nodiscard]] std::vector<Record> notes() const {
    std::ifstream in(notes_, std::ios::binary);
    std::vector<Record> records;
    for (Record record; in.read(reinterpret_cast<char*>(&record), sizeof record);) records.push_back(record);
    return records;
  }
  [[nodiscard]] bool has_sent() const {
    const auto records = notes();
    return std::ranges::any_of(records,
                               [](const Record& record) { return record.arrived && record.seq > 0; });
  }

 private:
  /// Logs at its pace on one thread and sends on another, as a station does.
  [[nodiscard]] int work(double entries_a_second, milliseconds time) const {
    const int file = open(notes_.c_str(), O_WRONLY | O_CREAT | O_APPEND, 0644);
    const auto keep = [&](const Record& record) {
      if (write(file, &record, sizeof record) != sizeof record) _exit(1);
    };
    auto writing = log();
    std::atomic<bool> done = false;
    std::thread sender([&] {
      const auto reading = open_log(log_, name_, logbook::OpenMode::read_only);
      plant::Station plant = station();
      std::int64_t known_there = 0;
      for (bool last = false; !last; std::this_thread::sleep_for(milliseconds(50))) {
        last = done;
        const auto head = reading.head();
        if (!head) _exit(3);
        if (!*head || (*head)->seq == known_there) continue;
        const auto sent = plant.send(reading);
        if (sent) {
          known_there = sent->sent + sent->already_there;
          keep({.arrived = true, .seq = known_there, .ended_us = now_us()});
        } else {
          std::ofstream(words_, std::ios::app) << text(sent.problems()) << '\n';
        }
      }
    });
    const auto start = steady_clock::now();
    const auto period = microseconds(static_cast<std::int64_t>(1e6 / entries_a_second));
    for (auto due = start; due - start < time; due += period) {
      std::this_thread::sleep_until(due);
      Record record{.began_us = now_us()};
      const auto entry = writing.append(note());
      record.ended_us = now_us();
      if (!entry) _exit(2);
      record.seq = entry->seq;
      std::memcpy(record.hash, entry->hash.data(), sizeof record.hash);
      keep(record);
    }
    done = true;
    sender.join();
    return 0;
  }

  std::string name_;
  std::filesystem::path log_, notes_, words_;
  plant::Connection connection_;
  pid_t process_ = -1;
};

Spread spread(std::vector<double> values) {
  if (values.empty()) return {};
  std::ranges::sort(values);
  const auto at = [&](double fraction) {
    return values[static_cast<std::size_t>(fraction * static_cast<double>(values.size() - 1))];
  };
  return {at(0.5), at(0.99), values.back()};
}

/// Breaks one thing and mends it. Returns when the server was frozen from and to, else twice the same.
std::pair<std::int64_t, std::int64_t> break_something(Breakage fault, Server& server,
                                                      std::vector<StationProcess>& stations,
                                                      std::mt19937& random, const Plan& plan) {
  const auto pause = [&](int most_ms) {
    std::this_thread::sleep_for(milliseconds(random() % static_cast<unsigned>(most_ms)));
  };
  switch (fault) {
    case Breakage::stations_killed: {
      pause(200);
      StationProcess& victim = stations[random() % stations.size()];
      victim.kill();
      victim.start(plan.entries_a_second, std::chrono::hours(1));
      break;
    }
    case Breakage::server_killed:
      pause(600);
      server.kill();
      pause(300);
      server.start();
      break;
    case Breakage::server_frozen: {
      pause(400);
      server.freeze();
      const std::int64_t from = now_us();
      std::this_thread::sleep_for(milliseconds(1500));
      const std::int64_t to = now_us();
      server.thaw();
      return {from, to};
    }
    case Breakage::connections_cut:
      pause(60);
      server.sql(
          "SELECT pg_terminate_backend(pid) FROM pg_stat_activity WHERE application_name = 'bathwright' "
          "AND pid <> pg_backend_pid()");
      break;
    case Breakage::all_together: {
      const Breakage one[] = {Breakage::stations_killed, Breakage::server_killed, Breakage::server_frozen,
                              Breakage::connections_cut};
      return break_something(one[random() % std::size(one)], server, stations, random, plan);
    }
    case Breakage::none:
      break;
  }
  return {0, 0};
}

}  // namespace

Aftermath run(const Plan& plan) {
  Server server(plan.where);
  const TempFolder folder(plan.where);
  const plant::TimeOuts short_ones{.connecting = std::chrono::seconds(2), .answer = std::chrono::seconds(1)};
  const bool under_faults = plan.breakage != Breakage::none;
  const std::string login = server.login(logbook::Role::operator_, "plating");
  std::vector<StationProcess> stations;
  for (int i = 0; i < plan.stations; ++i)
    stations.emplace_back(folder, i + 1,
                          server.over_tls(login, under_faults ? short_ones : plant::TimeOuts{}));

  Aftermath aftermath;
  std::mt19937 random(plan.seed);
  std::vector<std::pair<std::int64_t, std::int64_t>> frozen;
  for (StationProcess& station : stations)
    station.start(plan.entries_a_second, under_faults ? milliseconds(std::chrono::hours(1)) : plan.time);
  // What is broken must have been whole before, however slow the machine is.
  for (int tries = 0; under_faults && !stations.front().has_sent() && tries < 1000; ++tries)
    std::this_thread::sleep_for(milliseconds(20));
  const auto end = steady_clock::now() + plan.time;
  while (under_faults && steady_clock::now() < end) {
    frozen.push_back(break_something(plan.breakage, server, stations, random, plan));
    ++aftermath.faults;
  }
  for (StationProcess& station : stations) under_faults ? station.kill() : station.wait();

  std::vector<double> acknowledgement_ms, arrival_ms;
  aftermath.same = true;
  plant::Station auditor(server.as(server.login(logbook::Role::auditor, "*")));
  for (const StationProcess& station : stations) {
    const auto log = station.log();
    const auto entries = must(log.list());
    const std::string chain = entries.empty() ? "" : entries.front().hash;
    const auto before = must(auditor.list({.chain = chain}));
    std::vector<Record> waiting;
    std::int64_t said = 0;
    for (const Record& record : station.notes()) {
      if (!record.arrived) {
        ++aftermath.acknowledged;
        const auto place = static_cast<std::size_t>(record.seq - 1);
        if (place >= entries.size() || entries[place].hash != std::string(record.hash, sizeof record.hash))
          ++aftermath.lost_here;
        acknowledgement_ms.push_back(static_cast<double>(record.ended_us - record.began_us) / 1e3);
        for (const auto& [from, to] : frozen)
          if (record.began_us > from && record.ended_us < to) ++aftermath.while_frozen;
        waiting.push_back(record);
        continue;
      }
      said = std::max(said, record.seq);
      std::erase_if(waiting, [&](const Record& one) {
        if (one.seq > record.seq) return false;
        // An entry may have been sent before its station came to note the acknowledgement.
        arrival_ms.push_back(static_cast<double>(std::max<std::int64_t>(0, record.ended_us - one.ended_us)) /
                             1e3);
        return true;
      });
    }
    aftermath.said_to_be_there += static_cast<std::size_t>(said);
    for (std::int64_t seq = 1; seq <= said; ++seq)
      if (static_cast<std::size_t>(seq) > before.size() ||
          before[static_cast<std::size_t>(seq) - 1].entry.seq != seq)
        ++aftermath.lost_there;
    plant::Station plant = station.station();
    const auto sent = must(plant.send(log));
    aftermath.in_logs += entries.size();
    if (!entries.empty()) aftermath.same = aftermath.same && must(plant.fetch(sent.chain)) == entries;
    if (aftermath.words.empty()) aftermath.words = station.words();
  }
  aftermath.on_server = must(auditor.list()).size();
  aftermath.verified = must(auditor.verify(folder.path())).ok;
  aftermath.acknowledgement = spread(std::move(acknowledgement_ms));
  aftermath.arrival = spread(std::move(arrival_ms));
  return aftermath;
}

}  // namespace plant_test
