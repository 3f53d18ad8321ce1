#include "signing.hpp"

#include <chrono>

namespace bathwright::desktop {

work::Session signed_by(work::Session session, const Names& names) {
  if (!names.by.empty()) session.by = names.by;
  session.witness = names.second;
  session.pin = [names](const std::string& whose) -> Result<std::string> {
    if (whose == "PIN of " + names.second) return names.second_pin;
    return names.pin;
  };
  return session;
}

void Signing::start(Work work) {
  if (busy()) return;
  running_ = std::async(std::launch::async, [work = std::move(work), done = done_] {
    auto said = work();
    done();
    return said;
  });
}

std::optional<Result<std::string>> Signing::take() {
  using namespace std::chrono_literals;
  if (!busy() || running_.wait_for(0s) != std::future_status::ready) return std::nullopt;
  return running_.get();
}

}  // namespace bathwright::desktop
