#include <gtest/gtest.h>

#include "tests/trial/memory_ledger.h"

// A seed is all there is to a shift.
namespace probewright {
namespace {

using trial::MemoryLedger;
using trial::Trial;

db::Seal seal_after(std::uint64_t seed) {
  MemoryLedger ledger;
  Trial station{ledger.options(seed)};
  station.test("AQ20-048-00001");
  station.test("AQ20-048-00002");
  EXPECT_TRUE(station.finish());
  return station.seal();
}

// The frame's first promise: a seed is the whole shift, to the last hash.
TEST(Seed, OneSeedGivesOneSealAHundredTimes) {
  const db::Seal first = seal_after(7);
  EXPECT_GT(first.entry, 4);
  for (int i = 1; i < 100; ++i) ASSERT_EQ(seal_after(7), first) << "time " << i;
  EXPECT_NE(seal_after(8).hash, first.hash);
}

}  // namespace
}  // namespace probewright
