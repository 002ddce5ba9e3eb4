#include "drivers/phantom/answers.h"

#include <gtest/gtest.h>

#include "drivers/wire/block.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/link.h"
#include "station/base/entropy.h"

namespace {

using namespace probewright;
using namespace probewright::phantom;
using namespace std::string_view_literals;

TEST(PhantomAnswers, NumbersAreWholeTexts) {
  EXPECT_EQ(read_number("-2e-07"), -2e-7);
  EXPECT_EQ(read_number("25.12"), 25.12);
  for (const char* text : {"", " ", "1 ", "1,5", "nan", "inf", "0x10", "1.2.3", "25.12C"})
    EXPECT_THROW(read_number(text), wire::Miss) << text;
  EXPECT_EQ(read_whole("4294967295", 0, 4294967295), 4294967295);
  for (const char* text : {"-1", "4294967296", "1.0", "", "99999999999999999999"})
    EXPECT_THROW(read_whole(text, 0, 4294967295), wire::Miss) << text;
}

TEST(PhantomAnswers, WordsAreTheOnesOfTheWireText) {
  EXPECT_TRUE(read_truth("1"));
  EXPECT_FALSE(read_truth("0"));
  EXPECT_TRUE(read_closed("CLOS"));
  EXPECT_FALSE(read_closed("OPEN"));
  for (const char* text : {"", "2", "ON", "CLOSED", "open", "1;1"}) {
    EXPECT_THROW(read_truth(text), wire::Miss) << text;
    EXPECT_THROW(read_closed(text), wire::Miss) << text;
  }
  EXPECT_EQ(read_string("\"PHC-2026-0101\""), "PHC-2026-0101");
  EXPECT_EQ(read_string("\"a \"\"b\"\"\""), "a \"b\"");
  for (const char* text : {"", "PHC", "\"PHC", "\"a\",\"b\"", "1"}) EXPECT_THROW(read_string(text), wire::Miss) << text;
}

TEST(PhantomAnswers, ALineOfSeveralAnswersHasExactlySoMany) {
  EXPECT_EQ(read_answers("1;\"a;b\";3", 3), (std::vector<std::string>{"1", "\"a;b\"", "3"}));
  EXPECT_THROW(read_answers("1;2", 3), wire::Miss);
  EXPECT_THROW(read_answers("1;2;3;4", 3), wire::Miss);
}

TEST(PhantomAnswers, TheErrorQueueGivesNumberAndWords) {
  const DeviceError error = read_error("-222,\"Data out of range\"");
  EXPECT_EQ(error.number, -222);
  EXPECT_EQ(error.words, "Data out of range");
  for (const char* text : {"", "0", "-222,Data", "\"a\",\"b\"", "1e300,\"a\"", "-222,\"a\",1"})
    EXPECT_THROW(read_error(text), wire::Miss) << text;
}

TEST(PhantomAnswers, AnEmulatedDeviceSaysSo) {
  wire::Identity identity;
  read_identity("Alder Quay Sensors,PHANTOM,PH-01,1.2.0-emulated-x12.5", identity);
  EXPECT_EQ(identity.firmware, "1.2.0");
  EXPECT_TRUE(identity.emulated);
  EXPECT_EQ(identity.speed, 12.5);
  read_identity("Alder Quay Sensors,PHANTOM,PH-01,1.2.0", identity);
  EXPECT_FALSE(identity.emulated);
  EXPECT_EQ(identity.speed, 1.0);
  for (const char* text :
       {"", "a,b,c", "a,b,c,d,e", "a,b,c,1-emulated-x", "a,b,c,1-emulated-x0", "a,b,c,1-emulated-x-1"})
    EXPECT_THROW(read_identity(text, identity), wire::Miss) << text;
}

TEST(PhantomAnswers, ASettingReadBackMayBeWrittenInAnotherWay) {
  EXPECT_TRUE(same_setting("0.02", "0.020000"));
  EXPECT_TRUE(same_setting("2E-2", "0.020000"));
  EXPECT_TRUE(same_setting("OPEN", "OPEN"));
  EXPECT_FALSE(same_setting("0.020001", "0.020000"));  // one step of the exposure
  EXPECT_FALSE(same_setting("CLOS", "OPEN"));
  EXPECT_FALSE(same_setting("", "0"));
  EXPECT_FALSE(same_setting("1", "0"));
}

TEST(PhantomAnswers, ASpectrumOfAnyOtherSizeIsAMiss) {
  for (const std::size_t size : {0u, 4u, 16u, 2064u, 2067u, 2069u, 4096u}) {
    Bytes bytes(size);
    EXPECT_THROW(read_spectrum(wire::encode_block(bytes)), wire::Miss) << size;
  }
}

// Whatever comes, the readers give a value or a miss.
TEST(PhantomAnswers, AnyBytesAreReadOrMissed) {
  constexpr std::string_view alphabet = "0123456789.,;-+eE\"#|ONOPENCLOS \n\r\x00\x7F\xFF"sv;
  SeededEntropy entropy{1};
  int read = 0, missed = 0;
  const auto attempt = [&](const auto& reader) {
    try {
      reader();
      ++read;
    } catch (const wire::Miss&) {
      ++missed;
    }
  };
  for (int i = 0; i < 600; ++i) {
    std::string text(entropy.next() % 12, ' ');
    for (char& c : text) c = alphabet[entropy.next() % alphabet.size()];
    wire::Identity identity;
    attempt([&] { read_number(text); });
    attempt([&] { read_whole(text, -5, 5); });
    attempt([&] { read_string(text); });
    attempt([&] { read_numbers(text); });
    attempt([&] { read_set_points(text); });
    attempt([&] { read_identity(text, identity); });
    attempt([&] { read_error(text); });
    attempt([&] { read_spectrum(text); });
  }
  EXPECT_GT(read, 10);
  EXPECT_GT(missed, 3000);
}

}  // namespace
