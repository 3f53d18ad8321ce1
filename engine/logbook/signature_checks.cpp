#include "signature_checks.hpp"

#include <algorithm>
#include <future>
#include <thread>
#include <utility>

#include "signing.hpp"

namespace bathwright::logbook {

void SignatureChecks::check(SignatureToCheck signature) {
  constexpr std::size_t batch = 4096;
  waiting_.push_back(std::move(signature));
  if (waiting_.size() >= batch) finish();
}

void SignatureChecks::finish() {
  constexpr std::size_t worth_a_thread = 64;
  const std::size_t processors = std::max(1u, std::thread::hardware_concurrency());
  const std::size_t shares = std::min(processors, 1 + waiting_.size() / worth_a_thread);
  const auto wrong_of = [this](std::size_t from, std::size_t to) {
    std::vector<std::int64_t> wrong;
    for (std::size_t i = from; i < to; ++i)
      if (!signed_by(waiting_[i].key, waiting_[i].digest, waiting_[i].signature))
        wrong.push_back(waiting_[i].seq);
    return wrong;
  };
  std::vector<std::future<std::vector<std::int64_t>>> found;
  for (std::size_t share = 0; share < shares; ++share)
    found.push_back(std::async(shares > 1 ? std::launch::async : std::launch::deferred, wrong_of,
                               waiting_.size() * share / shares, waiting_.size() * (share + 1) / shares));
  for (auto& part : found)
    for (const std::int64_t seq : part.get()) wrong_(seq);
  waiting_.clear();
}

}  // namespace bathwright::logbook
