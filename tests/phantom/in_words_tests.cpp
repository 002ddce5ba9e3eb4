// Lines of the phantom as people read them.
#include <gtest/gtest.h>

#include "drivers/phantom/in_words.h"
#include "drivers/wire/checked_line.h"

namespace probewright::phantom {
namespace {

TEST(InWords, LinesTellTheirChecksum) {
  EXPECT_EQ(in_words("LID?"), "LID?   (no checksum)");
  std::string line = wire::add_checksum("LID?");
  line.pop_back();
  EXPECT_EQ(in_words(line), "LID?");
  line[0] = 'M';
  EXPECT_EQ(in_words(line), line + "   (wrong checksum)");
  EXPECT_EQ(in_words("#15abcde"), "8 bytes that are no spectrum: " + in_words("#15abcde").substr(30));
}

TEST(InWords, PiecesMakeLinesAndEmptyOnesAreLeftOut) {
  Listener listener;
  const std::string first = "\n" + wire::add_checksum("SYST:CHEC ON") + "PRO", second = "B?\n";
  EXPECT_EQ(listener.hear(std::as_bytes(std::span{first})), (std::vector<std::string>{"SYST:CHEC ON"}));
  EXPECT_TRUE(listener.in_mid_message());
  EXPECT_EQ(listener.hear(std::as_bytes(std::span{second})), (std::vector<std::string>{"PROB?   (no checksum)"}));
}

}  // namespace
}  // namespace probewright::phantom
