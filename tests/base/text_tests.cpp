#include <gtest/gtest.h>
#include <unistd.h>

#include <filesystem>
#include <fstream>

#include "station/base/digest.h"
#include "station/base/files.h"
#include "station/base/utf8.h"
#include "station/base/words.h"

namespace probewright {
namespace {

constexpr auto none = std::string_view::npos;

// Source: RFC 3629 section 4 (well-formed sequences) and section 7 (its examples).
TEST(Utf8, WellFormed) {
  for (const char* good :
       {"", "A", "A\u2262\u0391.", "\xED\x95\x9C\xEA\xB5\xAD\xEC\x96\xB4", "\xE6\x97\xA5\xE6\x9C\xAC\xE8\xAA\x9E",
        "\xEF\xBB\xBF\xF0\xA3\x8E\xB4", "\xC2\x80", "\xDF\xBF", "\xE0\xA0\x80", "\xEF\xBF\xBF", "\xF0\x90\x80\x80",
        "\xF4\x8F\xBF\xBF", "\xED\x9F\xBF"})
    EXPECT_EQ(first_bad_utf8(good), none) << good;
  EXPECT_EQ(count_characters("A\u2262\u0391."), 4u);
  EXPECT_EQ(count_characters("\U0001F600"), 1u);
}

TEST(Utf8, IllFormed) {
  for (const char* bad :
       {"\x80", "\xBF", "\xC0\x80", "\xC1\xBF", "\xC2", "\xE0\x9F\xBF", "\xE2\x82", "\xED\xA0\x80", "\xED\xBF\xBF",
        "\xF0\x8F\xBF\xBF", "\xF4\x90\x80\x80", "\xF5\x80\x80\x80", "\xFE", "\xFF", "\xF0\x90\x80"}) {
    EXPECT_EQ(first_bad_utf8(bad), 0u);
    EXPECT_EQ(first_bad_utf8("ab" + std::string{bad} + "c"), 2u);
  }
}

TEST(Utf8, ControlCharacters) {
  EXPECT_EQ(first_control_character("a\tb\r\n"), none);
  EXPECT_EQ(first_control_character(std::string_view{"a\0", 2}), 1u);
  EXPECT_EQ(first_control_character("ab\x1B[0m"), 2u);
  EXPECT_EQ(first_control_character("\x7F"), 0u);
  EXPECT_EQ(first_control_character("\u00e9"), none);
}

// Source: the usual textbook examples of the edit distance (common practice).
TEST(Words, EditDistance) {
  EXPECT_EQ(edit_distance("kitten", "sitting"), 3u);
  EXPECT_EQ(edit_distance("saturday", "sunday"), 3u);
  EXPECT_EQ(edit_distance("", "abc"), 3u);
  EXPECT_EQ(edit_distance("abc", ""), 3u);
  EXPECT_EQ(edit_distance("wdith", "width"), 1u);  // neighbours swapped
  EXPECT_EQ(edit_distance("ca", "abc"), 3u);       // not 2: no byte is touched twice
  EXPECT_EQ(edit_distance("same", "same"), 0u);
}

TEST(Digest, HexIsLowerCaseAndWhole) {
  Digest digest{};
  digest[0] = std::byte{0xBA};
  digest[31] = std::byte{0x0D};
  EXPECT_EQ(to_hex(digest), "ba" + std::string(60, '0') + "0d");
}

TEST(Files, ReadsWholeFilesWithinTheBound) {
  const auto path = std::filesystem::temp_directory_path() / ("probewright-files-" + std::to_string(::getpid()));
  const std::string text(70'000, 'x');
  std::ofstream{path, std::ios::binary} << text;
  EXPECT_EQ(read_file(path, 70'000).value(), text);
  EXPECT_EQ(read_file(path, 69'999).error().id, "file_too_large");
  EXPECT_EQ(read_file("/dev/zero", 1000).error().id, "file_too_large");
  std::filesystem::remove(path);
  const auto gone = read_file(path, 10);
  EXPECT_EQ(gone.error().id, "file_unreadable");
  EXPECT_EQ(gone.error().where, path.string());
  EXPECT_EQ(read_file(path.parent_path(), 10).error().id, "file_unreadable");
}

}  // namespace
}  // namespace probewright
