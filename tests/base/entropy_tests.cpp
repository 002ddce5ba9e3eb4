#include "station/base/entropy.h"

#include <gtest/gtest.h>

#include <set>

namespace probewright {
namespace {

// Source: the sequence of SplitMix64 (Steele, Lea, Flood 2014; Vigna's C rendering) for two seeds that other
// implementations print as their examples; from memory.
TEST(Entropy, SplitMix64KnownSequence) {
  SeededEntropy seeded{1234567};
  for (const std::uint64_t wanted :
       {6457827717110365317u, 3203168211198807973u, 9817491932198370423u, 4593380528125082431u, 16408922859458223821u})
    EXPECT_EQ(seeded.next(), wanted);
  SeededEntropy zero{0};
  for (const std::uint64_t wanted :
       {0xE220A8397B1DCDAFu, 0x6E789E6AA1B965F4u, 0x06C45D188009454Fu, 0xF88BB8A8724C81ECu})
    EXPECT_EQ(zero.next(), wanted);
}

TEST(Entropy, DerivedSeedsDiffer) {
  std::set<std::uint64_t> seeds;
  for (std::uint64_t seed = 0; seed < 100; ++seed)
    for (std::uint64_t index = 0; index < 100; ++index) seeds.insert(derived_seed(seed, index));
  EXPECT_EQ(seeds.size(), 10'000u);
  EXPECT_EQ(derived_seed(3, 4), derived_seed(3, 4));
}

TEST(Entropy, SystemEntropyDoesNotRepeat) {
  SystemEntropy entropy;
  std::set<std::uint64_t> seen;
  for (int i = 0; i < 1000; ++i) seen.insert(entropy.next());
  EXPECT_EQ(seen.size(), 1000u);  // two equal ones: odds of 3e-14
}

}  // namespace
}  // namespace probewright
