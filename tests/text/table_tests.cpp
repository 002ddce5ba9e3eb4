#include "station/text/table.h"

#include <gtest/gtest.h>

#include <stdexcept>

namespace probewright::text {
namespace {

TEST(Table, AlignsColumnsAndEndsLinesWithoutBlanks) {
  Table table({"check", "value", "unit"}, {Side::left, Side::right});
  table.add({"red drive current", "20.01", "mA"});
  table.add({"ratio", "1.2"});
  EXPECT_EQ(table.text(2),
            "  check              value  unit\n"
            "  red drive current  20.01  mA\n"
            "  ratio                1.2");
}

TEST(Table, CountsCharactersNotBytes) {
  Table table({"a", "b"});
  table.add({"\xC3\xA4\xC3\xB6", "x"});  // two characters, four bytes
  table.add({"abc", "y"});
  EXPECT_EQ(table.text(), "a    b\n\xC3\xA4\xC3\xB6   x\nabc  y");
}

TEST(Table, RefusesACellWithoutAColumn) {
  Table table({"a"});
  EXPECT_THROW(table.add({"1", "2"}), std::logic_error);
  EXPECT_TRUE(table.empty());
}

}  // namespace
}  // namespace probewright::text
