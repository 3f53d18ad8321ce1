// A station's way to the plant's shared table: its local log goes up, any log comes back, all are searched
// and verified. Local first: an entry counts once it is on the station's own disk, whether the server is
// there or not; what was sent already is passed over, so that sending again after any interruption is right.
// Not for writing entries; that is logbook.hpp. Read next: engine/plant/FORMAT.md.
#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/logbook.hpp"
#include "bathwright/plant/connection.hpp"

namespace bathwright::plant {

/// The last of the server's anchors: note it elsewhere, and a rewritten or shortened table shows.
struct Anchor {
  std::int64_t number = 0;  ///< 0: none
  std::string hash;

  bool operator==(const Anchor&) const = default;
};

struct Sent {
  std::string chain;      ///< names the log on the server: the hash of its first entry; "" if it is empty
  std::int64_t sent = 0;  ///< entries that are on the server since now
  std::int64_t already_there = 0;  ///< of this log, before
  std::int64_t missing_here = 0;   ///< entries of this log that the server has and the file has not
  Anchor anchor;                   ///< seals the last entry of this log that the server has
};

/// An entry as the server has it.
struct Arrived {
  logbook::Entry entry;
  std::string chain;
  std::string site;
  std::int64_t arrival = 0;  ///< 1, 2, 3 ... over all stations, without gaps
  std::string received;      ///< the server's clock, written as Entry::at
  std::string login;         ///< who sent it

  bool operator==(const Arrived&) const = default;
};

struct Filter {
  logbook::Filter entry{};  ///< as for a local log, but after_seq counts arrivals
  std::string site{}, station{}, chain{};
};

/// A log the server has.
struct Chain {
  std::string chain, site;
  std::string station;  ///< of its first entry
  std::int64_t entries = 0;
  std::string received;  ///< when the last of them came
};

struct Verification {
  struct OfChain {
    std::string chain, site;
    logbook::Verification log;  ///< what the log's own walk says, with the chain's anchors
  };
  bool ok = true;                     ///< nothing wrong in any chain nor with the anchors
  std::vector<OfChain> chains;        ///< of the sites the login sees, in order of their first arrival
  std::int64_t anchors = 0;           ///< walked; those of all sites
  std::vector<std::string> problems;  ///< with anchors, arrivals and the server's guards, a sentence each
  Anchor head;                        ///< the last anchor
};

/// Use each object from one thread at a time. Connects when first asked, and anew after the server was away.
/// Problems of kind io mean that the server could not be reached or did not answer in time: try again later.
class Station {
 public:
  /// `site` may be empty where the connection's login is bound to one site only.
  explicit Station(const Connection& connection, std::string site = {});
  Station(Station&&) noexcept;
  Station& operator=(Station&&) noexcept;
  ~Station();

  /// Every entry of `log` that the server does not have. A value means all of them are on the server's disk.
  /// After a problem some may be; those before an entry that the login may not write are. Refused where the
  /// server has another entry of the same number: two copies of one log went on apart.
  [[nodiscard]] Result<Sent> send(const logbook::Logbook& log);

  /// Every entry of the chain, for Logbook::take_over into a new file: the same entries, the same hashes.
  [[nodiscard]] Result<std::vector<logbook::Entry>> fetch(const std::string& chain);

  /// In order of their first arrival.
  [[nodiscard]] Result<std::vector<Chain>> chains();

  /// In order of arrival, of the sites the login sees.
  [[nodiscard]] Result<std::vector<Arrived>> list(const Filter& filter = {});

  /// Slips not closed in the log they stand in, of one tank or of all, in order of arrival.
  [[nodiscard]] Result<std::vector<Arrived>> open_slips(const std::string& tank = {});

  /// Walks every anchor and every chain the login sees, as of one moment, and holds them against each other
  /// and against anchors noted elsewhere. Each chain is copied into a log under `scratch`, an existing
  /// folder.
  [[nodiscard]] Result<Verification> verify(const std::filesystem::path& scratch,
                                            const std::vector<Anchor>& noted = {});

 private:
  struct State;
  std::unique_ptr<State> state_;
};

}  // namespace bathwright::plant
