#include "probe_cache.hpp"

#include <sys/stat.h>

#include "private_file.hpp"

namespace bathwright::plugin_host {

ProbeCache::ProbeCache(std::filesystem::path folder, const std::filesystem::path& program)
    : folder_(std::move(folder)), maker_(BATHWRIGHT_VERSION) {
  if (struct stat status{}; ::stat(program.c_str(), &status) == 0)
    maker_ += ' ' + std::to_string(status.st_size) + ' ' + std::to_string(status.st_mtim.tv_sec) + '.' +
              std::to_string(status.st_mtim.tv_nsec);
  maker_ += '\n';
}

std::optional<ProbeReport> ProbeCache::find(const std::string& sha256) const {
  if (folder_.empty()) return {};
  const auto kept = read_private(folder_ / sha256);
  if (!kept || !kept->starts_with(maker_)) return {};
  auto report = decoded(kept->substr(maker_.size()));
  if (!report) return {};
  return *std::move(report);
}

void ProbeCache::keep(const std::string& sha256, const ProbeReport& report) const {
  if (folder_.empty() || !report.repeatable) return;
  // Not kept: the next start probes again, which costs time and nothing else.
  (void)write_private(folder_ / sha256, maker_ + encoded(report));
}

}  // namespace bathwright::plugin_host
