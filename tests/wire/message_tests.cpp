#include "drivers/wire/message.h"

#include <gtest/gtest.h>

#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/line_reader.h"

namespace {

using namespace probewright;
using namespace probewright::wire;

std::string joined(const std::vector<std::string>& words) {
  std::string text;
  for (const auto& word : words) text += (text.empty() ? "" : ":") + word;
  return text;
}

/// Headers of all units, "MOD:RATE MOD:STAT LID?".
std::string headers(std::string_view line) {
  std::string text;
  for (const auto& unit : parse_message(line).units)
    text += (text.empty() ? "" : " ") + joined(unit.header) + (unit.query ? "?" : "");
  return text;
}

int fault_of(std::string_view line) {
  const auto message = parse_message(line);
  return message.fault ? message.fault->number : 0;
}

std::span<const std::byte> bytes_of(std::string_view text) { return std::as_bytes(std::span{text}); }

TEST(Message, SplitsUnitsAndFollowsTheBranch) {
  EXPECT_EQ(headers("MOD:RATE 5;STAT ON;:LID?"), "MOD:RATE MOD:STAT LID?");
  EXPECT_EQ(headers("*IDN?;*OPC?"), "*IDN? *OPC?");
  EXPECT_EQ(headers("MOD:DEPT:RED 0.01;*WAI;INFR 0.02"), "MOD:DEPT:RED *WAI MOD:DEPT:INFR");
  EXPECT_EQ(headers("  :SYST:ERR? ; CHEC?  "), "SYST:ERR? SYST:CHEC?");
  EXPECT_EQ(headers("LID?;TEMP?"), "LID? TEMP?");
  EXPECT_EQ(headers(""), "");
  EXPECT_EQ(headers(" \t\r"), "");
}

TEST(Message, DoesNotSplitInsideStringsAndBlocks) {
  const auto message = parse_message("SYST:ECHO? \"a;b,\"\"c\"\"\",'it''s',#15;,\"\n;;:LID?");
  ASSERT_FALSE(message.fault.has_value()) << message.fault->words;
  ASSERT_EQ(message.units.size(), 2u);
}

TEST(Message, ReadsEveryKindOfData) {
  const auto message = parse_message("X \"a;b,\"\"c\"\"\",'it''s',#15;,\"\n;, on , -1.5e-3 ms,+7,.5HZ,#HfF,#B101,#Q17");
  ASSERT_FALSE(message.fault.has_value()) << message.fault->words << message.fault->at;
  const auto& data = message.units.at(0).data;
  ASSERT_EQ(data.size(), 10u);
  EXPECT_EQ(data[0].kind, Datum::Kind::text);
  EXPECT_EQ(data[0].text, "a;b,\"c\"");
  EXPECT_EQ(data[1].text, "it's");
  EXPECT_EQ(data[2].kind, Datum::Kind::block);
  EXPECT_EQ(data[2].bytes.size(), 5u);
  EXPECT_EQ(data[3].kind, Datum::Kind::word);
  EXPECT_EQ(data[3].text, "ON");
  EXPECT_EQ(data[3].as_written, "on");
  EXPECT_EQ(data[4].number, -1.5e-3);
  EXPECT_EQ(data[4].suffix, "ms");
  EXPECT_EQ(data[4].as_written, "-1.5e-3 ms");
  EXPECT_EQ(data[5].number, 7.0);
  EXPECT_EQ(data[6].number, 0.5);
  EXPECT_EQ(data[6].suffix, "HZ");
  EXPECT_EQ(data[7].number, 255.0);
  EXPECT_EQ(data[8].number, 5.0);
  EXPECT_EQ(data[9].number, 15.0);
}

// Numbers of the faults: SCPI-1999, volume 2, 21.8 (from memory).
TEST(Message, NamesTheFaultAndKeepsTheUnitsBeforeIt) {
  EXPECT_EQ(fault_of("LID?"), 0);
  EXPECT_EQ(fault_of("1ID?"), -101);
  EXPECT_EQ(fault_of("LID?;"), -102);
  EXPECT_EQ(fault_of("LID?;;LID?"), -102);
  EXPECT_EQ(fault_of("SYST:"), -102);
  EXPECT_EQ(fault_of("::LID?"), -101);
  EXPECT_EQ(fault_of("*?"), -101);
  EXPECT_EQ(fault_of("MOD:RATE,5"), -102);
  EXPECT_EQ(fault_of("MOD:RATE 5,"), -102);
  EXPECT_EQ(fault_of("MOD:RATE 5 6"), -103);
  EXPECT_EQ(fault_of("MOD:RATE $"), -101);
  EXPECT_EQ(fault_of("MOD:RATE +"), -120);
  EXPECT_EQ(fault_of("MOD:RATE --5"), -120);
  EXPECT_EQ(fault_of("MOD:RATE +inf"), -120);
  EXPECT_EQ(fault_of("MOD:RATE -nan"), -120);
  EXPECT_EQ(fault_of("MOD:RATE ."), -120);
  EXPECT_EQ(fault_of("MOD:RATE 1e999"), -123);
  EXPECT_EQ(fault_of("MOD:RATE #H"), -120);
  EXPECT_EQ(fault_of("MOD:ABCDEFGHIJKLM 1"), -112);
  EXPECT_EQ(fault_of("MOD:ABCDEFGHIJKL 1"), 0);
  EXPECT_EQ(fault_of("SYST:ECHO? \"open"), -151);
  EXPECT_EQ(fault_of("X #15HELL"), -161);
  EXPECT_EQ(fault_of("X #0HELLO"), -161);
  EXPECT_EQ(fault_of("X #"), -161);
  EXPECT_EQ(fault_of("L\xC3\x9C?"), -102);
  const auto message = parse_message("MOD:RATE 5;STAT ON;RATE $;:LID?");
  EXPECT_EQ(message.units.size(), 2u);
  EXPECT_EQ(message.fault->at, 24u);
}

TEST(Message, KeywordsMatchShortOrLongAndNothingBetween) {
  for (const std::string_view yes : {"SYST", "SYSTEM", "syst", "System", "sYsTeM"})
    EXPECT_TRUE(keyword_matches("SYSTem", yes)) << yes;
  for (const std::string_view no : {"SYS", "SYSTE", "SYSTEMS", "", "SYSTEn", "YST"})
    EXPECT_FALSE(keyword_matches("SYSTem", no)) << no;
  EXPECT_TRUE(keyword_matches("CHANnel2", "chan2"));
  EXPECT_TRUE(keyword_matches("CHANnel2", "channel2"));
  EXPECT_FALSE(keyword_matches("CHANnel2", "chan"));
  EXPECT_TRUE(keyword_matches("*IDN", "*idn"));
}

bool matches(std::string_view pattern, std::string_view line) {
  return header_matches(pattern, parse_message(line).units.at(0));
}

TEST(Message, HeadersMatchWithOptionalKeywordsAndQueryMark) {
  EXPECT_TRUE(matches("SYSTem:ERRor[:NEXT]?", "syst:err?"));
  EXPECT_TRUE(matches("SYSTem:ERRor[:NEXT]?", "SYSTEM:ERROR:NEXT?"));
  EXPECT_FALSE(matches("SYSTem:ERRor[:NEXT]?", "syst:err"));
  EXPECT_FALSE(matches("SYSTem:ERRor[:NEXT]?", "syst:err:nex?"));
  EXPECT_FALSE(matches("SYSTem:ERRor[:NEXT]?", "syst:err:next:next?"));
  EXPECT_FALSE(matches("SYSTem:ERRor[:NEXT]?", "err?"));
  EXPECT_TRUE(matches("[SOURce:]LEVel", "lev 1"));
  EXPECT_TRUE(matches("[SOURce:]LEVel", "sour:lev 1"));
  EXPECT_TRUE(matches("*IDN?", "*idn?"));
  EXPECT_FALSE(matches("*IDN?", "idn?"));
  EXPECT_TRUE(matches("PROBe:COUNt?", "PROB:COUN?"));
  EXPECT_FALSE(matches("PROBe?", "PROB:COUN?"));
}

// Multipliers and the special cases of HZ and OHM: IEEE 488.2, table 7-2 (from memory).
TEST(Message, UndoesUnitsOfNumbers) {
  const auto value = [](std::string_view number, std::string_view unit) {
    const auto data = parse_data(number);
    return number_in(data->at(0), unit);
  };
  EXPECT_EQ(*value("20 ms", "S"), 0.02);
  EXPECT_EQ(*value("0.02", "S"), 0.02);
  EXPECT_EQ(*value("0.02 S", "s"), 0.02);
  EXPECT_EQ(*value("350us", "S"), 0.00035);
  EXPECT_EQ(*value("5 HZ", "HZ"), 5.0);
  EXPECT_EQ(*value("5 kHz", "HZ"), 5000.0);
  EXPECT_EQ(*value("5 MHZ", "HZ"), 5e6);
  EXPECT_EQ(*value("5 MAHZ", "HZ"), 5e6);
  EXPECT_EQ(*value("5 MOHM", "OHM"), 5e6);
  EXPECT_EQ(*value("5 MA", "A"), 0.005);
  EXPECT_EQ(*value("1e3", ""), 1000.0);
  EXPECT_EQ(value("5 V", "S").error().arguments.at(0).second, "-131");
  EXPECT_EQ(value("5 XS", "S").error().arguments.at(0).second, "-131");
  EXPECT_EQ(value("5 S", "").error().arguments.at(0).second, "-131");
  EXPECT_EQ(value("ON", "S").error().arguments.at(0).second, "-104");
}

TEST(Message, ReadsAnswers) {
  const auto error = parse_data("-113,\"Undefined header\"");
  ASSERT_TRUE(error.has_value());
  EXPECT_EQ(error->at(0).number, -113.0);
  EXPECT_EQ(error->at(1).text, "Undefined header");
  EXPECT_EQ(parse_data("1;2").error().id, "message_malformed");
  EXPECT_EQ(parse_data("").error().id, "message_malformed");
  const auto pieces = split_outside("1;\"a;b\";#12;;;x", ';');
  ASSERT_EQ(pieces.size(), 4u);
  EXPECT_EQ(pieces[1], "\"a;b\"");
  EXPECT_EQ(pieces[2], "#12;;");
  EXPECT_EQ(split_outside("Alder Quay Sensors,PHANTOM,PH-0007,1.0.0", ',').size(), 4u);
  EXPECT_EQ(split_outside("", ',').size(), 1u);
  EXPECT_EQ(parse_data(quoted("say \"x\""))->at(0).text, "say \"x\"");
}

// Check value 29B1: catalogue of CRC algorithms.
TEST(CheckedLine, CarriesTheCatalogueValueAndComesBack) {
  EXPECT_EQ(add_checksum("123456789"), "123456789|29B1\n");
  EXPECT_EQ(add_checksum(""), "|FFFF\n");
  EXPECT_EQ(*strip_checksum("123456789|29B1\n"), "123456789");
  EXPECT_EQ(*strip_checksum("123456789|29B1"), "123456789");
  EXPECT_EQ(*strip_checksum(add_checksum("a|b|29B1")), "a|b|29B1");
  const std::string binary("#16\0\n|\r\xFF;", 9);
  EXPECT_EQ(*strip_checksum(add_checksum(binary)), binary);
  EXPECT_EQ(strip_checksum("123456789").error().id, "line_checksum_missing");
  EXPECT_EQ(strip_checksum("123456789|29b1").error().id, "line_checksum_missing");
  EXPECT_EQ(strip_checksum("29B1").error().id, "line_checksum_missing");
  EXPECT_EQ(strip_checksum("12345678|29B1").error().id, "line_checksum_wrong");
}

TEST(CheckedLine, NoSingleDamagedByteIsTaken) {
  const std::string good = add_checksum("MOD:RATE 5;RATE?");
  for (std::size_t at = 0; at + 1 < good.size(); ++at) {
    for (int value = 0; value < 256; ++value) {
      std::string changed = good;
      changed[at] = static_cast<char>(value);
      if (changed != good && static_cast<char>(value) != '\n')
        EXPECT_FALSE(strip_checksum(changed).has_value()) << "byte " << at << " changed to " << value;
    }
    EXPECT_FALSE(strip_checksum(std::string{good}.erase(at, 1)).has_value()) << at;
    EXPECT_FALSE(strip_checksum(std::string{good}.insert(at, 1, good[at])).has_value()) << at;
  }
}

std::vector<std::string> lines_of(LineReader& reader, std::string_view text, std::size_t piece) {
  std::vector<std::string> lines;
  for (std::size_t at = 0; at < text.size(); at += piece) {
    reader.feed(bytes_of(text.substr(at, piece)));
    while (auto line = reader.next()) lines.push_back(*std::move(line));
  }
  return lines;
}

TEST(LineReader, CutsAtLineFeedsInAnyPieces) {
  for (std::size_t piece = 1; piece < 30; ++piece) {
    LineReader reader{100};
    const auto lines = lines_of(reader, "LID?\r\n\n*IDN?;X \"\n#15\nrest", piece);
    EXPECT_EQ(lines, (std::vector<std::string>{"LID?", "", "*IDN?;X \"", "#15"}));
    EXPECT_TRUE(reader.partial());
  }
}

TEST(LineReader, KeepsLineFeedsInsideBlocks) {
  const std::string block = encode_block(bytes_of("a\n\"#15\n\r"));
  for (std::size_t piece = 1; piece < 30; ++piece) {
    LineReader reader{100, LineReader::Blocks::inside};
    const auto lines = lines_of(reader, block + "\n1;" + block + ";\"#19\"|29B1\n#10\n#H1F\n#15\n", piece);
    EXPECT_EQ(lines, (std::vector<std::string>{block, "1;" + block + ";\"#19\"|29B1", "#10", "#H1F"}));
    EXPECT_TRUE(reader.partial());  // the last block waits for its bytes
    reader.clear();
    EXPECT_FALSE(reader.partial());
    EXPECT_EQ(lines_of(reader, "LID?\n", piece), std::vector<std::string>{"LID?"});
  }
}

TEST(LineReader, DropsALineThatIsTooLongUpToItsEnd) {
  for (const auto blocks : {LineReader::Blocks::none, LineReader::Blocks::inside}) {
    LineReader reader{8, blocks};
    EXPECT_EQ(lines_of(reader, "12345678\n123456789\nok\n#9999999999\n2\n\n#18\n\n\n\n\n\n\n3\n", 3).back(), "3");
    EXPECT_GE(reader.overlong(), 2u);
    EXPECT_FALSE(reader.partial());
  }
  LineReader exact{8};
  EXPECT_EQ(lines_of(exact, "12345678\n", 4), std::vector<std::string>{"12345678"});
}

}  // namespace
