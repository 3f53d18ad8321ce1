#include "quarantine.hpp"

#include <fcntl.h>
#include <sys/file.h>
#include <sys/stat.h>

#include <cerrno>
#include <system_error>

#include "file_trust.hpp"

namespace bathwright::plugin_host {
namespace fs = std::filesystem;

namespace {

/// Marks not yet locked have another name, so that settle() never takes one for a dead process's.
constexpr const char* not_yet = ".new";

/// The hash at the start of a mark's name "<sha256>.<process>".
std::string hash_of(const fs::path& mark) {
  const std::string name = mark.filename().string();
  return name.substr(0, name.find('.'));
}

}  // namespace

LoadingMark::~LoadingMark() {
  if (lock_) ::unlink(file_.c_str());
}

void Quarantine::settle() const {
  if (folder_.empty()) return;
  std::error_code failed;
  for (fs::directory_iterator entry(loading(), failed), end; !failed && entry != end;
       entry.increment(failed)) {
    if (entry->path().extension() == not_yet) continue;
    const Descriptor mark(::open(entry->path().c_str(), O_RDONLY | O_CLOEXEC | O_NOFOLLOW));
    struct stat status {};
    if (!mark || ::flock(mark.get(), LOCK_EX | LOCK_NB) != 0) continue;       // somebody is loading it now
    if (::fstat(mark.get(), &status) != 0 || status.st_nlink == 0) continue;  // and was through just now
    if (!own_folder(held())) return;
    std::error_code gone;  // another start may have moved it first
    fs::rename(entry->path(), held() / hash_of(entry->path()), gone);
  }
}

bool Quarantine::holds(const std::string& sha256) const {
  std::error_code failed;
  return !folder_.empty() && fs::exists(held() / sha256, failed);
}

bool Quarantine::release(const std::string& sha256) const {
  std::error_code failed;
  return !folder_.empty() && fs::remove(held() / sha256, failed);
}

Result<LoadingMark> Quarantine::mark(const std::string& sha256, const fs::path& plugin) const {
  const auto cannot = [&](const std::string& why) {
    return Problem{Fault::io, loading().string(),
                   "no mark can be made that a plugin is being loaded (" + why + ")", "", ""};
  };
  if (folder_.empty()) return cannot("no folder for it");
  if (Outcome folder = own_folder(loading()); !folder) return folder.problems();
  LoadingMark mark;
  mark.file_ = loading() / (sha256 + '.' + std::to_string(::getpid()));
  const fs::path first = mark.file_.string() + not_yet;
  mark.lock_ = Descriptor(::open(first.c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC | O_NOFOLLOW, 0600));
  const std::string content = plugin.string() + '\n';
  if (!mark.lock_ || ::write(mark.lock_.get(), content.data(), content.size()) < 0 ||
      ::flock(mark.lock_.get(), LOCK_EX | LOCK_NB) != 0 || ::rename(first.c_str(), mark.file_.c_str()) != 0)
    return cannot(std::generic_category().message(errno));
  return mark;
}

}  // namespace bathwright::plugin_host
