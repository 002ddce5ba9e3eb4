#include "station/text/live_block.h"

#include <gtest/gtest.h>

#include <sstream>

namespace probewright::text {
namespace {

TEST(CutTo, CountsCharactersAndNotBytes) {
  EXPECT_EQ(cut_to("nest 1", 10), "nest 1");
  EXPECT_EQ(cut_to("nest 1", 4), "nest");
  EXPECT_EQ(cut_to("\xC3\xBC\xC3\xB6\xC3\xA4", 2), "\xC3\xBC\xC3\xB6");
  EXPECT_EQ(cut_to("abc", 0), "");
}

/// What stands on a terminal of 79 columns after this output: only what LiveBlock sends is understood.
std::string screen_of(const std::string& sent) {
  std::vector<std::string> lines{""};
  std::size_t row = 0;
  for (std::size_t at = 0; at < sent.size(); ++at) {
    if (sent.compare(at, 3, "\x1b[A") == 0) {
      --row;
      at += 2;
    } else if (sent.compare(at, 3, "\x1b[J") == 0) {
      lines.resize(row + 1);
      lines[row].clear();
      at += 2;
    } else if (sent.compare(at, 3, "\x1b[K") == 0) {
      at += 2;  // always at the end of a line here
    } else if (sent[at] == '\n') {
      if (++row == lines.size()) lines.emplace_back();
    } else if (sent[at] != '\r') {
      lines[row] += sent[at];
    }
  }
  std::string all;
  for (const std::string& line : lines) all += line + "\n";
  return all;
}

class OnATerminal : public ::testing::Test {
 protected:
  std::ostringstream out, err;
  Console console{out, err, {false, true, true}};
};

TEST_F(OnATerminal, TheBlockStaysInPlaceAndWhatIsSaidStandsAboveIt) {
  LiveBlock block{console, LiveBlock::On::err};
  ASSERT_TRUE(block.live());
  block.draw({"nest 1 empty", "nest 2 empty"});
  EXPECT_EQ(screen_of(err.str()), "nest 1 empty\nnest 2 empty\n");
  block.draw({"nest 1 testing", "nest 2 empty"});
  EXPECT_EQ(screen_of(err.str()), "nest 1 testing\nnest 2 empty\n");
  block.say("AQ20-048-00001 PASS");
  EXPECT_EQ(screen_of(err.str()), "AQ20-048-00001 PASS\nnest 1 testing\nnest 2 empty\n");
  block.remove();
  EXPECT_EQ(screen_of(err.str()), "AQ20-048-00001 PASS\n\n");
  EXPECT_EQ(out.str(), "");
}

TEST_F(OnATerminal, NothingIsSentWhereNothingChanged) {
  LiveBlock block{console, LiveBlock::On::out};
  block.draw({"nest 1 empty"});
  const std::string before = out.str();
  block.draw({"nest 1 empty"});
  EXPECT_EQ(out.str(), before);
}

TEST(Elsewhere, NothingIsDrawnAndWhatIsSaidIsALine) {
  std::ostringstream out, err;
  Console console{out, err, {false, false, false}};
  LiveBlock block{console, LiveBlock::On::out};
  EXPECT_FALSE(block.live());
  block.draw({"nest 1 empty"});
  block.say("AQ20-048-00001 PASS");
  block.remove();
  EXPECT_EQ(out.str(), "AQ20-048-00001 PASS\n");
}

}  // namespace
}  // namespace probewright::text
