#include <algorithm>
#include <atomic>
#include <bathwright/plugin_host/allow_list.hpp>
#include <bathwright/plugin_host/registry.hpp>
#include <optional>
#include <thread>

#include "loader.hpp"
#include "probe.hpp"
#include "probe_cache.hpp"
#include "quarantine.hpp"

namespace bathwright::plugin_host {
namespace {

/// A file on its way to being loaded.
struct Candidate {
  Listed listed;
  std::optional<SealedCopy> copy;  ///< nothing once it is known that it will not be loaded
  std::optional<ProbeReport> report;

  void stop(State state, const Problems& problems) {
    listed.state = state;
    listed.problems = problems;
    copy.reset();
  }
};

bool is_allowed(const std::string& sha256, const Places& places, const AllowList& list) {
  return std::ranges::count(places.allowed, sha256) > 0 || list.holds(sha256);
}

bool is_data(const std::filesystem::path& file) { return file.string().ends_with(data_suffix); }

Candidate candidate_of(const FoundFile& found, const Places& places, const AllowList& list,
                       const Quarantine& quarantine) {
  Candidate candidate{{found.path, "", "", "", State::refused, {}, {}}, {}, {}};
  // Whoever can write in a folder above the program's own can replace the program: looking there finds
  // nothing.
  auto copy =
      sealed_copy(found.path, found.origin == Origin::program ? Above::not_looked_at : Above::to_the_root);
  if (!copy) {
    candidate.stop(State::refused, copy.problems());
    return candidate;
  }
  candidate.listed.sha256 = copy->sha256;
  candidate.copy = *std::move(copy);
  if (is_data(found.path)) return candidate;
  const std::string path = found.path.string(), command = "bathwright plugins allow '" + path + "'";
  if (!is_allowed(candidate.listed.sha256, places, list))
    candidate.stop(State::not_allowed, {{Fault::refused, path, "is not allowed yet; nothing of it has run",
                                         "", "Run " + command + "; it shows what it is and asks."}});
  else if (quarantine.holds(candidate.listed.sha256))
    candidate.stop(State::quarantined, {{Fault::refused, path, "the program died while loading it", "",
                                         "Run " + command + "; it probes it again and releases it."}});
  return candidate;
}

/// Two at a time, so that one which uses up its time does not hold up all others.
void probe_where_new(std::vector<Candidate>& candidates, const Places& places) {
  const ProbeCache cache(places.cache, places.probe);
  std::vector<Candidate*> unknown;
  for (Candidate& candidate : candidates) {
    if (!candidate.copy || is_data(candidate.listed.path)) continue;
    candidate.report = cache.find(candidate.copy->sha256);
    if (!candidate.report) unknown.push_back(&candidate);
  }
  std::atomic<std::size_t> next{0};
  const auto work = [&] {
    for (std::size_t mine; (mine = next++) < unknown.size();) {
      Candidate& candidate = *unknown[mine];
      candidate.report = probe(*candidate.copy, places.probe);
      cache.keep(candidate.copy->sha256, *candidate.report);
    }
  };
  std::optional<std::thread> second;
  if (unknown.size() > 1) second.emplace(work);
  work();
  if (second) second->join();
  for (Candidate& candidate : candidates)
    if (candidate.report && !candidate.report->problems().empty()) {
      if (!candidate.report->types.empty()) {
        candidate.listed.id = candidate.report->types.front().id;
        candidate.listed.version = candidate.report->types.front().version;
      }
      candidate.stop(State::refused, candidate.report->problems());
    }
}

}  // namespace

std::string_view name(State state) {
  switch (state) {
    case State::ready:
      return "ready";
    case State::shadowed:
      return "shadowed";
    case State::not_allowed:
      return "not allowed yet";
    case State::quarantined:
      return "quarantined";
    case State::refused:
      break;
  }
  return "refused";
}

BathTypes BathTypes::discover(const Places& places) {
  BathTypes known;
  const auto refuse = [&](const Problem& problem) {
    known.list_.push_back({problem.where, "", "", "", State::refused, {problem}, {}});
  };
  AllowList allowed;
  if (!places.data.empty()) {
    auto list = AllowList::read(allow_list_file(places.data));
    if (list)
      allowed = *std::move(list);
    else
      std::ranges::for_each(list.problems(), refuse);
  }
  const Quarantine quarantine(places.state);
  quarantine.settle();

  const FoundFiles found = find_plugin_files(places.folders);
  std::ranges::for_each(found.problems, refuse);
  std::vector<Candidate> candidates;
  for (const FoundFile& file : found.files)
    if (places.read_data_file || !is_data(file.path))
      candidates.push_back(candidate_of(file, places, allowed, quarantine));
  probe_where_new(candidates, places);

  for (Candidate& candidate : candidates) {
    if (!candidate.copy) {
      known.list_.push_back(std::move(candidate.listed));
      continue;
    }
    if (is_data(candidate.listed.path)) {
      if (auto type = places.read_data_file(candidate.listed.path.string())) {
        known.take({*std::move(type)}, candidate.listed);
      } else {
        candidate.listed.problems = type.problems();
        known.list_.push_back(std::move(candidate.listed));
      }
      continue;
    }
    const auto mark = quarantine.mark(candidate.copy->sha256, candidate.listed.path);
    if (!mark && !places.state.empty()) candidate.listed.notes.push_back(text(mark.problems()));
    if (Result<LoadedPlugin> plugin = load(*std::move(candidate.copy))) {
      auto [types, notes] = *std::move(plugin);
      candidate.listed.notes.insert(candidate.listed.notes.end(), notes.begin(), notes.end());
      known.take(std::move(types), candidate.listed);
    } else {
      candidate.listed.problems = plugin.problems();
      known.list_.push_back(std::move(candidate.listed));
    }
  }
  return known;
}

void BathTypes::take(std::vector<bath::BathType> types, const Listed& shared) {
  for (bath::BathType& type : types) {
    Listed listed = shared;
    listed.id = type.id;
    listed.version = type.version;
    listed.state = State::ready;
    const auto earlier = std::ranges::find_if(
        list_, [&](const Listed& l) { return l.state == State::ready && l.id == type.id; });
    if (earlier == list_.end()) {
      types_.push_back(std::move(type));
    } else {
      listed.state = State::shadowed;
      listed.problems.push_back({Fault::refused, listed.path.string(),
                                 "bath type '" + listed.id + "' is shadowed", "",
                                 earlier->path.string() + " has it already and comes first."});
    }
    list_.push_back(std::move(listed));
  }
}

const bath::BathType* BathTypes::find(std::string_view id) const {
  const auto found = std::ranges::find(types_, id, &bath::BathType::id);
  return found == types_.end() ? nullptr : &*found;
}

Result<Examined> examine(const std::filesystem::path& file, const Places& places) {
  const auto copy = sealed_copy(file, Above::to_the_root);
  if (!copy) return copy.problems();
  Examined examined{copy->sha256, std::ranges::count(places.allowed, copy->sha256) > 0,
                    probe(*copy, places.probe)};
  ProbeCache(places.cache, places.probe).keep(copy->sha256, examined.report);
  return examined;
}

void release_from_quarantine(const std::string& sha256, const Places& places) {
  Quarantine(places.state).release(sha256);
}

}  // namespace bathwright::plugin_host
