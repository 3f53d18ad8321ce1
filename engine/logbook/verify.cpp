#include "verify.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <utility>

#include "chain.hpp"
#include "index_checks.hpp"
#include "migrations.hpp"
#include "roll.hpp"
#include "schema.hpp"
#include "signature_checks.hpp"
#include "stored_entry.hpp"

namespace bathwright::logbook {
namespace {

/// SQLite's own check of pages, column types and constraints. What the indexes hold, IndexChecks looks at.
void check_file(const Database& database, std::vector<Finding>& findings) {
  constexpr const char* at_most_20_lines = "PRAGMA quick_check(20)";
  Statement check = database.prepare(at_most_20_lines);
  while (check.step())
    if (check.text(0) != "ok")
      findings.push_back({FindingKind::unreadable, 0, "the file is damaged: " + check.text(0)});
  if (check.failed()) findings.push_back({FindingKind::unreadable, 0, database.problem().text()});
}

class Walk {
 public:
  Walk(const Database& database, Verification& report) : database_(database), report_(report) {}

  void all() {
    Statement rows = database_.prepare(select_entries("ORDER BY seq"));
    while (rows.step()) visit(rows);
    signatures_.finish();
    indexes_.compare(database_, report_.problems);
    if (rows.failed()) find(FindingKind::unreadable, last_seq_, database_.problem().text());
    report_.head = last_hash_;
  }

 private:
  void visit(const Statement& row) {
    ++report_.entries;
    indexes_.take(row);
    const auto entry = read_entry(row);
    if (!entry) {
      const std::int64_t seq = row.integer(column::seq);
      check_sequence(seq);
      find(FindingKind::changed, seq, entry.problems().front().text());
      pass(seq, row.text(column::hash), row.text(column::at));
      return;
    }
    const bool in_sequence = check_sequence(entry->seq);
    check_form(*entry);
    latest_at_ = std::max(latest_at_, entry->at);
    if (row.view(column::latest_at) != latest_at_)
      find(FindingKind::changed, entry->seq,
           fmt::format("what the table notes beside entry {}, for lists by time, was changed", entry->seq));
    check_signers(*entry);
    if (chain_hash(*entry) != entry->hash)
      find(FindingKind::changed, entry->seq, fmt::format("entry {} is not as it was logged", entry->seq));
    if (in_sequence && entry->previous != last_hash_) report_broken_link(*entry);
    if (entry->at < last_at_)
      report_.clock_steps.push_back({FindingKind::clock_back, entry->seq,
                                     fmt::format("entry {} is dated {}, before the {} of entry {}",
                                                 entry->seq, entry->at, last_at_, last_seq_)});
    pass(entry->seq, entry->hash, entry->at);
  }

  /// The hash of form 1 does not cover the columns of later versions, so it must not come back.
  void check_form(const Entry& entry) {
    const Entry blank;
    const bool old = entry.form == 1;
    if (entry.form < 1 || entry.form > schema_version)
      find(FindingKind::changed, entry.seq,
           fmt::format("entry {} is marked as of form {}, which there is not", entry.seq, entry.form));
    else if (old && (last_form_ > 1 || !entry.happened.empty() || entry.uptime != blank.uptime ||
                     !entry.role.empty() || !entry.witness.empty() || !entry.bath_type.empty() ||
                     !entry.signature.empty() || !entry.witness_signature.empty()))
      find(FindingKind::changed, entry.seq,
           fmt::format("entry {} is marked as of an earlier form than it can be", entry.seq));
    last_form_ = entry.form;
  }

  /// That everyone it names may have written it and did sign it. The roll is that of the entries before.
  void check_signers(const Entry& entry) {
    if (const auto refusal = roll_.refusal(entry))
      find(FindingKind::signature, entry.seq,
           fmt::format("entry {} could not have been written: {}", entry.seq, refusal->what));
    const bool first_person = entry.kind == EntryKind::person && roll_.people().empty();
    const std::string witness_key = key_of(entry.witness);
    std::string by_key = key_of(entry.by);
    (void)roll_.take(entry);  // a body that tells nobody was refused above
    if (first_person) by_key = key_of(entry.by);

    const bool by_signs = first_person || !entry.role.empty() || !entry.signature.empty();
    const bool witness_signs = !entry.witness.empty() || !entry.witness_signature.empty();
    if (!by_signs && !witness_signs) return;
    const std::string digest = content_digest(entry);
    if (by_signs) signatures_.check({entry.seq, by_key, digest, entry.signature});
    if (witness_signs) signatures_.check({entry.seq, witness_key, digest, entry.witness_signature});
  }

  std::string key_of(const std::string& name) const {
    const Person* person = roll_.person(name);
    return person ? person->key : "";
  }

  /// True when `seq` is the one that comes next.
  bool check_sequence(std::int64_t seq) {
    if (seq <= last_seq_)
      find(FindingKind::reordered, seq,
           fmt::format("entry number {} is out of order; {} was expected", seq, last_seq_ + 1));
    if (seq > last_seq_ + 1)
      find(FindingKind::gap, seq,
           seq == last_seq_ + 2 ? fmt::format("entry {} is missing", last_seq_ + 1)
                                : fmt::format("entries {} to {} are missing", last_seq_ + 1, seq - 1));
    return seq == last_seq_ + 1;
  }

  void report_broken_link(const Entry& entry) {
    Statement followed = database_.prepare("SELECT seq FROM entry WHERE hash = ?");
    followed.bind(1, entry.previous);
    if (followed.step())
      find(FindingKind::reordered, entry.seq,
           fmt::format("entry {} was logged behind what is now entry {}, not behind entry {}", entry.seq,
                       followed.integer(0), last_seq_));
    else
      find(FindingKind::link, entry.seq,
           fmt::format("entry {} was logged behind an entry that is not in the log; entry {} was put in its "
                       "place or altered",
                       entry.seq, last_seq_));
  }

  void find(FindingKind kind, std::int64_t seq, std::string words) {
    report_.problems.push_back({kind, seq, std::move(words)});
  }

  void pass(std::int64_t seq, std::string hash, std::string at) {
    if (seq <= last_seq_) return;  // a stray entry does not move the walk
    last_seq_ = seq;
    last_hash_ = std::move(hash);
    last_at_ = std::move(at);
  }

  const Database& database_;
  Verification& report_;
  Roll roll_;
  SignatureChecks signatures_{[this](std::int64_t seq) {
    find(FindingKind::signature, seq, fmt::format("entry {} is not signed by whom it names", seq));
  }};
  std::int64_t last_form_ = 1;
  std::int64_t last_seq_ = 0;
  std::string last_hash_ = first_previous();
  std::string last_at_, latest_at_;
  IndexChecks indexes_{database_};
};

/// Each anchor must be the hash of an entry, and of the one it was noted of.
void check_anchors(const Database& database, const std::vector<Anchor>& anchors,
                   std::vector<Finding>& findings) {
  for (const Anchor& anchor : anchors) {
    Statement found = database.prepare("SELECT seq FROM entry WHERE hash = ?");
    found.bind(1, anchor.hash);
    if (!found.step())
      findings.push_back(
          {FindingKind::cut, anchor.seq,
           fmt::format("the entry{} noted with hash {} is not in the log: the end was cut off or "
                       "rewritten, or it is another log's",
                       anchor.seq > 0 ? fmt::format(" {}", anchor.seq) : "", anchor.hash)});
    else if (anchor.seq > 0 && found.integer(0) != anchor.seq)
      findings.push_back({FindingKind::cut, anchor.seq,
                          fmt::format("the entry noted as {} stands as {}", anchor.seq, found.integer(0))});
  }
}

}  // namespace

Verification verify_chain(const Database& database, const std::vector<Anchor>& anchors) {
  Verification report;
  // One read transaction: entries logged meanwhile by others are left for the next time.
  if (const auto begun = database.execute("BEGIN"); !begun)
    report.problems.push_back({FindingKind::unreadable, 0, begun.problems().front().text()});
  check_file(database, report.problems);
  check_guards(database, report.problems);
  Walk(database, report).all();
  check_anchors(database, anchors, report.problems);
  std::ranges::stable_sort(report.problems, {}, &Finding::seq);
  (void)database.execute("COMMIT");
  report.ok = report.problems.empty();
  return report;
}

}  // namespace bathwright::logbook
