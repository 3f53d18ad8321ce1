#include "support.hpp"

using namespace bathwright::logbook;

// The expected hashes come from Python's own BLAKE2b over the bytes laid down in FORMAT.md:
//   import hashlib, struct
//   field = lambda b: struct.pack('>I', len(b)) + b
//   number = lambda n: struct.pack('>Q', n)
//   blake = lambda parts: hashlib.blake2b(b''.join(map(field, parts)), digest_size=32)
//   def chain_hash(seq, kind, body, about, previous):
//       text = lambda *all: [t.encode() for t in all]
//       digest = blake([b'bathwright logbook 2', number(seq),
//                       *text(kind, 'nickel-1', 'night', '2026-03-02T05:40:00.000Z', '', 'boot-1'),
//                       number(72000), *text('line-a', 'M. Okafor', '', '', body), b'' if about is None else
//                       number(about), *text('bathwright 0.1.0', 'watts-nickel 1.0.0', previous)]).digest()
//       return blake([b'bathwright logbook 2, link', digest, b'', b'']).hexdigest()
//   first = chain_hash(1, 'ampere-hours', '{"Ah":1250}', None, '0' * 64)
//   second = chain_hash(2, 'correction', '{"Ah":1520,"reason":"digits swapped"}', 1, first)
TEST_CASE("the hash is BLAKE2b-256 over the documented bytes", "[reference][logbook]") {
  const TempFolder folder;
  HeldClock clock;
  clock.on = {"boot-1", std::chrono::seconds(72)};
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock,
                                {.station = "line-a", .program = "bathwright 0.1.0"}));
  NewEntry entry = note();
  entry.kind = EntryKind::ampere_hours;
  entry.body = R"({"Ah":1250})";
  entry.bath_type = "watts-nickel 1.0.0";
  CHECK(must(log.append(entry)).hash == "e2c6c76606037e17902b7987b64300ad85624e37cd23a23ef93e03adf90cfa94");
  entry.kind = EntryKind::correction;
  entry.body = R"({"Ah":1520,"reason":"digits swapped"})";
  entry.about = 1;
  CHECK(must(log.append(entry)).hash == "3485fb816c0177e762443d58a8520086db0fdea6e05715b29657712a1c3b8b0e");
}

// files/version-1.sqlite was written by the program as it was before format version 2 and never since.
TEST_CASE("a log of format version 1 is brought up to date, read and carried on", "[reference][logbook]") {
  const TempFolder folder;
  const auto path = folder / "old.sqlite";
  const std::string last = "2d19867d99bc80c909f6579027f50b3c5aec4e6a6a97316e15ec0e8640fbba75";
  std::filesystem::copy_file(std::filesystem::path(TEST_DIR) / "files/version-1.sqlite", path);
  const HeldClock clock;
  {
    const auto log = must(Logbook::open(path, OpenMode::read_only, clock));  // of a copy in memory
    CHECK(must(log.list()).size() == 6);
    CHECK(log.verify({{6, last}}).ok);
    CHECK(must(log.list({.text = "漢"})).size() == 1);
  }
  {
    auto log = must(Logbook::open(path, OpenMode::read_write, clock));
    CHECK(must(log.list({.text = "boric acid"})).size() == 3);
    CHECK(must(log.append(note())).previous == last);
    CHECK(log.verify({{6, last}}).ok);
  }
  CHECK(must(Logbook::open(path, OpenMode::read_only, clock)).verify({{6, last}}).ok);
}
