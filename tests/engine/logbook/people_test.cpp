// Who may write what, at the store: PINs, roles, second signatures, shutting out, open slips.
#include <algorithm>

#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

const Credential chemist{"A. Chemist", "271828"}, hand{"O. Hand", "314159"}, other{"P. Other", "161803"},
    auditor{"Q. Auditor", "141421"};

NewEntry of_kind(EntryKind kind, std::optional<std::int64_t> about = {}) {
  NewEntry entry = note();
  entry.kind = kind;
  entry.by.clear();
  entry.about = about;
  if (kind == EntryKind::correction) entry.body = R"({"reason":"digits swapped"})";
  if (kind == EntryKind::slip_closed) entry.body = R"({"outcome":"done"})";
  if (kind == EntryKind::setting)
    entry.body = R"({"second_signature":{"tank":"nickel-1","kinds":["addition"]}})";
  return entry;
}

Signatures by(const Credential& one) { return {one, {}}; }

/// A log with four people.
struct Shop {
  TempFolder folder;
  HeldClock clock;
  Logbook log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock, {.pin_cost = cheap}));

  Shop() {
    must(log.admit(chemist.name, Role::chemist, chemist.pin));
    must(log.admit(hand.name, Role::operator_, hand.pin, by(chemist)));
    must(log.admit(other.name, Role::operator_, other.pin, by(chemist)));
    must(log.admit(auditor.name, Role::auditor, auditor.pin, by(chemist)));
  }
};

std::string refusal(const Result<Entry>& result) {
  REQUIRE_FALSE(result);
  CHECK(result.problems()[0].kind == Fault::refused);
  return result.problems()[0].what;
}

}  // namespace

TEST_CASE("a log with people takes only what one of them signed and may write", "[failure][logbook]") {
  Shop shop;
  NewEntry unsigned_note = note();
  CHECK(refusal(shop.log.append(unsigned_note)) == "\"M. Okafor\" has not signed");
  unsigned_note.by = hand.name;
  CHECK(refusal(shop.log.append(unsigned_note)) == "\"O. Hand\" has not signed");
  unsigned_note.by = other.name;
  CHECK(refusal(shop.log.append(unsigned_note, by(hand))) == "written by P. Other and signed by O. Hand");

  using enum EntryKind;
  for (const EntryKind kind : {analysis, plan, addition, level, ampere_hours, note, hand_over})
    CHECK(must(shop.log.append(of_kind(kind), by(hand))).role == "operator");
  for (const EntryKind kind : {slip, dump, setting})
    CHECK_THAT(refusal(shop.log.append(of_kind(kind), by(hand))),
               Catch::Equals("no chemist approved it") || Catch::Contains("may not write this"));
  for (const EntryKind kind : {analysis, note, slip, setting})
    CHECK(refusal(shop.log.append(of_kind(kind), by(auditor))) ==
          "Q. Auditor is auditor and may not write this");
  for (const EntryKind kind : {dump, slip, setting})
    CHECK(must(shop.log.append(of_kind(kind), by(chemist))).seq > 0);
  CHECK_FALSE(shop.log.append(of_kind(failed_pin), by(chemist)));
  CHECK(shop.log.admit("N. New", Role::operator_, "999999", by(hand)).problems()[0].kind == Fault::refused);
  CHECK(shop.log.verify().ok);
}

TEST_CASE("the first of a log's people is a chemist", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock, {.pin_cost = cheap}));
  must(log.append(note()));
  CHECK_FALSE(log.append(of_kind(EntryKind::setting)));
  CHECK(refusal(log.append(note(), by(hand))) == "the log has no people, so nobody can sign");
  CHECK(refusal(log.admit(hand.name, Role::operator_, hand.pin)) ==
        "the first person of a log is not its chemist");
  CHECK(log.admit(chemist.name, Role::chemist, "12345").problems()[0].what == "5 characters");
  CHECK(must(log.people()).empty());
  must(log.admit(chemist.name, Role::chemist, chemist.pin));
  CHECK_FALSE(log.append(note()));
  CHECK(log.verify().ok);
}

TEST_CASE("a tank that asks for it gets two signatures, of two persons", "[failure][logbook]") {
  Shop shop;
  must(shop.log.ask_second_signature({"nickel-1", {EntryKind::addition}}, by(chemist)));
  const NewEntry addition = of_kind(EntryKind::addition);
  CHECK(refusal(shop.log.append(addition, by(hand))) == "tank nickel-1 asks for a second signature on this");
  CHECK(refusal(shop.log.append(addition, {hand, hand})) == "O. Hand signed twice");
  CHECK(refusal(shop.log.append(addition, {hand, auditor})) == "Q. Auditor may not sign second");
  CHECK(must(shop.log.append(addition, {hand, other})).witness == other.name);
  must(shop.log.append(of_kind(EntryKind::note), by(hand)));
  must(shop.log.ask_second_signature({"nickel-1", {}}, by(chemist)));
  must(shop.log.append(addition, by(hand)));
  CHECK(shop.log.verify().ok);
}

TEST_CASE("five wrong PINs shut a name out for a quarter of an hour, whatever the wall clock says",
          "[failure][logbook]") {
  Shop shop;
  shop.clock.on = {"boot-1", std::chrono::hours(1)};
  const Credential guess{hand.name, "000000"};
  for (int i = 0; i < 4; ++i)
    CHECK(refusal(shop.log.append(note(), by(guess))) == "this is not the PIN of O. Hand");
  must(shop.log.append(of_kind(EntryKind::note), by(hand)));  // the count starts anew
  for (int i = 0; i < 5; ++i) CHECK_FALSE(shop.log.append(of_kind(EntryKind::note), by(guess)));
  CHECK(refusal(shop.log.append(of_kind(EntryKind::note), by(hand))) ==
        "O. Hand is shut out after 5 wrong PINs");
  must(shop.log.append(of_kind(EntryKind::note), by(other)));
  shop.clock.now += std::chrono::hours(24);  // setting the wall clock on does not help
  CHECK_FALSE(shop.log.append(of_kind(EntryKind::note), by(hand)));
  shop.clock.on.since += std::chrono::minutes(15);
  must(shop.log.append(of_kind(EntryKind::note), by(hand)));

  for (int i = 0; i < 5; ++i) CHECK_FALSE(shop.log.append(of_kind(EntryKind::note), by(guess)));
  CHECK_FALSE(shop.log.append(of_kind(EntryKind::note), by(hand)));
  must(shop.log.unlock(hand.name, by(chemist)));
  must(shop.log.append(of_kind(EntryKind::note), by(hand)));
  CHECK(must(shop.log.list({.kind = EntryKind::failed_pin})).size() == 14);
  CHECK(shop.log.verify().ok);
}

TEST_CASE("a PIN is changed by its owner, a role by the chemist, and who left signs nothing more",
          "[unit][logbook]") {
  Shop shop;
  const Credential renewed{hand.name, "577215"};
  must(shop.log.change_pin(hand, renewed.pin));
  CHECK(refusal(shop.log.append(of_kind(EntryKind::note), by(hand))) == "this is not the PIN of O. Hand");
  must(shop.log.append(of_kind(EntryKind::note), by(renewed)));
  must(shop.log.retire(hand.name, by(chemist)));
  CHECK(refusal(shop.log.append(of_kind(EntryKind::note), by(renewed))) == "O. Hand signs no more");
  CHECK_FALSE(shop.log.change_pin(renewed, "111111"));
  CHECK(must(shop.log.people()).size() == 4);
  CHECK(shop.log.verify().ok);
}

TEST_CASE("a slip blocks the next of its tank until it is closed", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  const auto write = [&](NewEntry entry) {
    entry.by = "M. Okafor";
    return log.append(entry);
  };
  using enum EntryKind;
  const std::int64_t slip_seq = must(write(of_kind(slip))).seq;
  CHECK_THAT(refusal(write(of_kind(slip))), Catch::Contains("slip 1 of tank nickel-1 is still open"));
  NewEntry elsewhere = of_kind(slip);
  elsewhere.tank = "zinc-2";
  must(write(elsewhere));
  must(write(of_kind(addition, slip_seq)));
  must(write(of_kind(addition, slip_seq)));
  CHECK(must(log.open_slips("nickel-1")).size() == 1);
  CHECK(must(log.open_slips()).size() == 2);
  CHECK(write(of_kind(addition, 3)).problems()[0].what == "entry 3 is no slip but addition");
  NewEntry how = of_kind(slip_closed, slip_seq);
  how.body = "{}";
  CHECK_FALSE(write(how));
  how.body = R"({"outcome":"cancelled"})";
  CHECK(write(how).problems()[0].what == "a slip cancelled without a reason");
  must(write(of_kind(slip_closed, slip_seq)));
  CHECK(write(of_kind(slip_closed, slip_seq)).problems()[0].what == "slip 1 is closed");
  CHECK(write(of_kind(addition, slip_seq)).problems()[0].what == "slip 1 is closed");
  CHECK(must(write(of_kind(slip))).seq == 6);
}

TEST_CASE("a slip is approved by a chemist who did not prepare it", "[failure][logbook]") {
  Shop shop;
  const Credential second{"R. Second", "662607"};
  must(shop.log.admit(second.name, Role::chemist, second.pin, by(chemist)));
  using enum EntryKind;
  const std::int64_t seq = must(shop.log.append(of_kind(slip), by(chemist))).seq;
  CHECK(shop.log.append(of_kind(slip_approved), by(second)).problems()[0].what == "no slip named");
  CHECK(refusal(shop.log.append(of_kind(slip_approved, seq), by(chemist))) ==
        "A. Chemist prepared this slip");
  CHECK_THAT(refusal(shop.log.append(of_kind(slip_approved, seq), by(hand))),
             Catch::Contains("may not write this"));
  CHECK(must(shop.log.append(of_kind(slip_approved, seq), by(second))).about == seq);
  must(shop.log.append(of_kind(slip_closed, seq), by(hand)));
  CHECK(shop.log.append(of_kind(slip_approved, seq), by(second)).problems()[0].what ==
        "slip " + std::to_string(seq) + " is closed");
  CHECK(shop.log.verify().ok);
}

TEST_CASE("another copy's entries carry a log on, or none does", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto ours = must(Logbook::open(folder / "ours.log", OpenMode::create, clock));
  auto theirs = must(Logbook::open(folder / "theirs.log", OpenMode::create, clock));
  for (const char* text : {"one", "two", "three"}) must(theirs.append(note(text)));
  const auto all = must(theirs.list());
  CHECK(must(ours.take_over({all[0], all[1]})) == 2);
  CHECK(must(ours.take_over(all)) == 1);
  CHECK(must(ours.take_over(all)) == 0);
  CHECK(must(ours.list()) == all);
  CHECK(ours.verify().ok);
  must(ours.append(note("only here")));
  const Entry fourth = must(theirs.append(note("only there")));
  CHECK_THAT(ours.take_over({fourth}).problems()[0].what, Catch::Contains("two copies of it went on apart"));
  auto gap = must(Logbook::open(folder / "gap.log", OpenMode::create, clock));
  CHECK_FALSE(gap.take_over({all[1]}));
  Entry altered = all[0];
  altered.body = "{}";
  CHECK(gap.take_over({altered}).problems()[0].what == "it is not as it was logged");
  CHECK(must(gap.list()).empty());
}
