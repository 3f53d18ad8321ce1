#include "support.hpp"

using namespace bathwright::logbook;

// The expected hashes come from Python's own BLAKE2b over the bytes laid down in FORMAT.md:
//   import hashlib, struct
//   field = lambda b: struct.pack('>I', len(b)) + b
//   number = lambda n: struct.pack('>Q', n)
//   def chain_hash(seq, texts, corrects, program, previous):
//       parts = [b'bathwright logbook 1', number(seq), *(t.encode() for t in texts),
//                b'' if corrects is None else number(corrects), program.encode(), previous.encode()]
//       return hashlib.blake2b(b''.join(map(field, parts)), digest_size=32).hexdigest()
//   signed = ['nickel-1', 'night', '2026-03-02T05:40:00.000Z', 'line-a', 'M. Okafor']
//   first = chain_hash(1, ['ampere-hours', *signed, '{"Ah":1250}'], None, 'bathwright 0.1.0', '0' * 64)
//   second = chain_hash(2, ['correction', *signed, '{"Ah":1520,"reason":"digits swapped"}'], 1,
//                       'bathwright 0.1.0', first)
TEST_CASE("the hash is BLAKE2b-256 over the documented bytes", "[reference][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock, {.station = "line-a"}));
  NewEntry entry = note();
  entry.kind = EntryKind::ampere_hours;
  entry.body = R"({"Ah":1250})";
  CHECK(must(log.append(entry)).hash == "3bce782aa30d5299aae757aae611c5c7579422a94b1199529df9393803c86e0d");
  entry.kind = EntryKind::correction;
  entry.body = R"({"Ah":1520,"reason":"digits swapped"})";
  entry.corrects = 1;
  CHECK(must(log.append(entry)).hash == "cffc6b8605dc5d5ec8ba246f4dad015b88f4d84692e43d2029d13705abe429ee");
}
