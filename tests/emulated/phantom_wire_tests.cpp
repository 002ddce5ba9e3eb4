#include <gtest/gtest.h>

#include <cmath>

#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "station/base/numbers.h"
#include "tests/emulated/trial.h"

// Source of everything here: drivers/phantom/WIRE.md, section by section.
namespace probewright::emulated {
namespace {

class PhantomWire : public ::testing::Test {
 protected:
  Trial trial;
  PhantomEnd phantom{trial};
  double timed(std::string_view message) {
    const double start_s = trial.now_s();
    EXPECT_NE(phantom.ask(message), "(silence)") << message;
    return trial.now_s() - start_s;
  }
};

// --- 1 line

TEST_F(PhantomWire, NeverSpeaksUnasked) { EXPECT_EQ(phantom.receive(5.0), ""); }

TEST_F(PhantomWire, IgnoresEmptyLinesAndCarriageReturns) {
  phantom.send("\n\r\n\n");
  EXPECT_EQ(phantom.ask("LID?\r"), "CLOS");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "0,\"No error\"");
}

TEST_F(PhantomWire, ThrowsAwayALineThatIsTooLong) {
  phantom.send(std::string(1025, 'X') + "\n");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-363,\"Input buffer overrun\"");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "0,\"No error\"");
  EXPECT_EQ(phantom.ask(std::string(1020, ' ') + "LID?"), "CLOS");  // 1024 bytes are allowed
}

TEST_F(PhantomWire, WorksInOrderAndKeepsWhatComesMeanwhile) {
  phantom.send("*TST?\nLID?\nSYST:VERS?\n");
  EXPECT_EQ(phantom.receive(1.0), "0\nCLOS\n1999.0\n");
}

TEST_F(PhantomWire, TakesBytesInPieces) {
  for (const char* piece : {"SY", "ST:V", "ERS", "?", "\n"}) phantom.send(piece);
  EXPECT_EQ(phantom.receive(0.1), "1999.0\n");
}

TEST_F(PhantomWire, KeywordsHaveTwoFormsAndNothingBetween) {
  EXPECT_EQ(phantom.ask("SYSTEM:VERSION?"), "1999.0");
  EXPECT_EQ(phantom.ask("syst:vers?"), "1999.0");
  EXPECT_EQ(phantom.error_of("SYSTE:VERS?"), -113);
  EXPECT_EQ(phantom.ask("SYSTem:ERRor:NEXT?"), "0,\"No error\"");
}

TEST_F(PhantomWire, UnitsKeepTheBranch) {
  EXPECT_EQ(phantom.ask("MOD:RATE 5;STAT ON;:LID?"), "CLOS");
  EXPECT_EQ(phantom.ask("MOD:STAT?"), "1");
  EXPECT_EQ(phantom.ask("SPEC:EXP 30 ms;*CLS;AVER 4;EXP?;AVER?"), "0.03;4");
}

TEST_F(PhantomWire, StopsAtTheFirstErrorButAnswersWhatCameBefore) {
  EXPECT_EQ(phantom.ask("LID?;SPEC:AVER 65;AVER?;:SYST:VERS?"), "CLOS");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-222,\"Data out of range\"");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "0,\"No error\"");
  EXPECT_EQ(phantom.ask("SPEC:AVER?"), "1");
  EXPECT_EQ(phantom.ask("LID?;;LID?"), "CLOS");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-102,\"Syntax error\"");
}

TEST_F(PhantomWire, NumbersCarryUnits) {
  for (const char* text : {"20 ms", "20ms", "0.02", "2e-2 S", "20000 US", "20e3us"}) {
    EXPECT_EQ(phantom.ask("SPEC:EXP 1;EXP " + std::string(text) + ";EXP?"), "0.02") << text;
  }
  EXPECT_EQ(phantom.ask("MOD:RATE 2.5 HZ;RATE?"), "2.5");
  EXPECT_EQ(phantom.error_of("SPEC:EXP 5 HZ"), -131);
  EXPECT_EQ(phantom.error_of("MOD:RATE 5 ms"), -131);
  EXPECT_EQ(phantom.error_of("SPEC:AVER 5 ms"), -131);
}

// --- 1.1 checksum mode

TEST_F(PhantomWire, ChecksumModeBeginsWithTheAnswerOfThatMessage) {
  // The checksums were computed apart from this program, bit by bit in Python.
  EXPECT_EQ(phantom.ask("SYST:CHEC ON;CHEC?"), "1|C782");
  EXPECT_EQ(phantom.ask("LID?", 0.5), "(silence)");  // now without checksum: not executed
  const std::string error = phantom.ask("SYST:ERR?|E80A");
  EXPECT_EQ(error.substr(0, error.size() - 5), "-360,\"Communication error\"");
  EXPECT_EQ(wire::strip_checksum(error).value(), "-360,\"Communication error\"");
}

TEST_F(PhantomWire, WrongChecksumIsNotExecutedInEitherMode) {
  EXPECT_EQ(phantom.ask("LID?|0000", 0.5), "(silence)");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-360,\"Communication error\"");
  EXPECT_EQ(phantom.ask("SYST:CHEC ON;CHEC?|E82D"), "1|C782");
  EXPECT_EQ(phantom.ask("LID?|20E6"), "CLOS|6E28");
  EXPECT_EQ(phantom.ask("LID?|0000", 0.5), "(silence)");
  EXPECT_EQ(phantom.ask("LID?", 0.5), "(silence)");
}

TEST_F(PhantomWire, ModeSurvivesResetAndEndsOnCommand) {
  phantom.ask("SYST:CHEC ON;CHEC?");
  const auto checked = [](std::string_view text) {
    std::string line = wire::add_checksum(text);
    line.pop_back();
    return line;
  };
  EXPECT_EQ(phantom.ask(checked("*RST;LID?")), checked("CLOS"));
  EXPECT_EQ(phantom.ask(checked("SYST:CHEC OFF;CHEC?")), "0");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  EXPECT_EQ(phantom.ask(checked("LID?")), "CLOS");
}

// --- 2.1 common

TEST_F(PhantomWire, Identifies) {
  EXPECT_EQ(phantom.ask("*IDN?"), "Alder Quay Sensors,PHANTOM,PH-01,1.0.0-emulated-x1");
}

TEST(PhantomSpeed, IsAnnounced) {
  BenchOptions options = Trial::perfect();
  options.speed = 20.0;
  options.nests = 2;
  Trial trial(options);
  PhantomEnd phantom(trial, {2, DeviceKind::phantom});
  EXPECT_EQ(phantom.ask("*IDN?"), "Alder Quay Sensors,PHANTOM,PH-02,1.0.0-emulated-x20");
  EXPECT_EQ(phantom.ask("CERT:NUMB?"), "\"PHC-2026-0102\"");
  const double start_s = trial.now_s();
  EXPECT_EQ(phantom.ask("*TST?"), "0");
  EXPECT_NEAR(trial.now_s() - start_s, 0.010, 0.001);  // 200 ms at 20 times the speed
}

TEST_F(PhantomWire, StatusRegisters) {
  EXPECT_EQ(phantom.ask("*ESR?"), "128");  // power-on
  EXPECT_EQ(phantom.ask("*ESR?"), "0");
  EXPECT_EQ(phantom.ask("*ESE?;*SRE?;*STB?"), "0;0;0");
  phantom.send("NONSENSE\n");
  EXPECT_EQ(phantom.ask("*STB?"), "4");
  EXPECT_EQ(phantom.ask("*ESE 32;*ESE?;*STB?"), "32;36");
  EXPECT_EQ(phantom.ask("*SRE 4;*SRE?;*STB?"), "4;100");
  EXPECT_EQ(phantom.ask("*RST;*ESE?;*SRE?"), "32;4");
  EXPECT_EQ(phantom.ask("*ESR?"), "32");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-113,\"Undefined header\"");
  phantom.send("SPEC:AVER 0\n");
  EXPECT_EQ(phantom.ask("*ESR?"), "16");
  phantom.send("LID?|0000\n");
  EXPECT_EQ(phantom.ask("*ESR?"), "8");
  EXPECT_EQ(phantom.ask("*CLS;SYST:ERR?;*ESR?;*STB?"), "0,\"No error\";0;0");
  EXPECT_EQ(phantom.error_of("*ESE 256"), -222);
  EXPECT_EQ(phantom.error_of("*SRE"), -109);
}

TEST_F(PhantomWire, OperationCompleteFollowsTheOptics) {
  trial.wait_s(1.0);
  phantom.ask("*ESR?");
  EXPECT_EQ(phantom.ask("*OPC;*ESR?"), "1");
  EXPECT_EQ(phantom.ask("MOD:STAT ON;*OPC;*ESR?"), "0");
  trial.wait_s(0.2);
  EXPECT_EQ(phantom.ask("*ESR?"), "1");
  phantom.send("MOD:SETP 2\n");
  EXPECT_NEAR(timed("*OPC?"), 0.150, 0.005);
  phantom.send("MOD:SETP 1\n");
  EXPECT_NEAR(timed("*WAI;LID?"), 0.150, 0.005);
  EXPECT_LT(timed("*WAI;LID?"), 0.005);
}

TEST_F(PhantomWire, SelfTestTakesItsTime) {
  EXPECT_NEAR(timed("*TST?"), 0.200, 0.005);
  EXPECT_EQ(phantom.ask("*TST?"), "0");
}

TEST_F(PhantomWire, ResetGoesBackToTheMarkedValues) {
  phantom.ask("SPEC:EXP 1;AVER 9;SHUT CLOS;:MOD:SETP 3;RATE 2;DEPT:RED 0.05;INFR 0.06;:MOD:STAT ON;:LID?");
  phantom.ask("PATH:OPAQ ON;:LAMP:STAT ON;LEV 1;FLIC 100;:LINE:STAT ON;:LID?");
  EXPECT_EQ(phantom.ask("SPEC:EXP?;AVER?;SHUT?;:MOD:SETP?;RATE?;DEPT:RED?;INFR?;:MOD:STAT?"),
            "1;9;CLOS;3;2;0.05;0.06;1");
  EXPECT_EQ(phantom.ask("PATH:OPAQ?;:LAMP:STAT?;LEV?;FLIC?;:LINE:STAT?"), "1;1;1;100;1");
  phantom.send("BAD\n*RST\n");
  EXPECT_EQ(phantom.ask("SPEC:EXP?;AVER?;SHUT?;:MOD:SETP?;RATE?;DEPT:RED?;INFR?;:MOD:STAT?"),
            "0.02;1;OPEN;0;5;0.01;0.01;0");
  EXPECT_EQ(phantom.ask("PATH:OPAQ?;:LAMP:STAT?;LEV?;FLIC?;:LINE:STAT?"), "0;0;0.5;0;0");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-113,\"Undefined header\"");  // the queue stays
}

// --- 2.2 system

TEST_F(PhantomWire, ErrorQueueHoldsSixteen) {
  for (int i = 0; i < 17; ++i) phantom.send("SPEC:AVER 0\n");
  for (int i = 0; i < 15; ++i) EXPECT_EQ(phantom.ask("SYST:ERR?"), "-222,\"Data out of range\"") << i;
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "-350,\"Queue overflow\"");
  EXPECT_EQ(phantom.ask("SYST:ERR?"), "0,\"No error\"");
}

TEST_F(PhantomWire, EchoesStrings) {
  EXPECT_EQ(phantom.ask("SYST:ECHO? \"0123ABCD\""), "\"0123ABCD\"");
  EXPECT_EQ(phantom.ask("SYST:ECHO? \"say \"\"a;b|c\"\"\""), "\"say \"\"a;b|c\"\"\"");
  EXPECT_EQ(phantom.error_of("SYST:ECHO? \"\""), -222);
  EXPECT_EQ(phantom.error_of("SYST:ECHO? \"" + std::string(33, 'a') + "\""), -222);
  EXPECT_EQ(phantom.error_of("SYST:ECHO? 5"), -104);
  EXPECT_EQ(phantom.error_of("SYST:ECHO?"), -109);
  EXPECT_EQ(phantom.error_of("SYST:ECHO? \"abc"), -151);
}

TEST_F(PhantomWire, BootNumberChangesWithThePower) {
  const std::string before = phantom.ask("SYST:BOOT?");
  EXPECT_EQ(phantom.ask("SYST:BOOT?"), before);
  EXPECT_GE(std::stol(before), 1);
  EXPECT_LE(std::stol(before), 2147483647);
  phantom.ask("SPEC:AVER 7;:SYST:CHEC OFF;CHEC?");
  ASSERT_TRUE(trial.bench.restart(phantom1));
  EXPECT_NE(phantom.ask("SYST:BOOT?"), before);
  EXPECT_EQ(phantom.ask("SPEC:AVER?"), "1");
  EXPECT_EQ(phantom.ask("*ESR?"), "128");
}

TEST_F(PhantomWire, CertificateIsTold) {
  EXPECT_EQ(phantom.ask("CERT:NUMB?;DUE?"), "\"PHC-2026-0101\";\"2027-06-30\"");
}

TEST(PhantomCertificate, CanBeWrong) {
  BenchOptions options = Trial::perfect();
  options.wrong_certificate = {phantom1};
  Trial trial(options);
  PhantomEnd phantom(trial);
  EXPECT_EQ(phantom.ask("CERT:NUMB?"), "\"PHC-2024-0901\"");
}

// --- 2.3 spectrometer

struct Reading {
  std::uint32_t number, exposure_us;
  int frames, shutter, full, temperature, pixels;
  std::vector<std::uint16_t> counts;
};

Reading read_block(const std::string& answer) {
  EXPECT_EQ(answer.substr(0, 6), "#42068");
  const auto block = wire::decode_block(answer).value();
  EXPECT_EQ(block.length, answer.size());
  wire::LeReader fields{block.bytes};
  Reading r{fields.u32(), fields.u32(), fields.u16(), fields.u8(), fields.u8(), fields.i16(), fields.u16(), {}};
  for (int i = 0; i < 1024; ++i) r.counts.push_back(fields.u16());
  EXPECT_EQ(fields.u32(), wire::crc32(std::span{block.bytes}.first(2064)));
  EXPECT_TRUE(fields.finished());
  return r;
}

TEST_F(PhantomWire, ReadsDarkAndLight) {
  ASSERT_TRUE(trial.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  AdapterEnd adapter(trial);
  adapter.ask(0x02, pack().u32(20000).u32(20000).take());
  Reading light = read_block(phantom.ask("SPEC:AVER 4;EXP 20 ms;READ?"));
  EXPECT_EQ(light.number, 1u);
  EXPECT_EQ(light.exposure_us, 20000u);
  EXPECT_EQ(light.frames, 4);
  EXPECT_EQ(light.shutter, 1);
  EXPECT_EQ(light.full, 0);
  EXPECT_NEAR(light.temperature, 2500, 6);
  EXPECT_EQ(light.pixels, 1024);
  EXPECT_GT(*std::max_element(light.counts.begin(), light.counts.end()), 15000);
  Reading dark = read_block(phantom.ask("SPEC:SHUT CLOS;READ?"));
  EXPECT_EQ(dark.number, 2u);
  EXPECT_EQ(dark.shutter, 0);
  EXPECT_LT(*std::max_element(dark.counts.begin(), dark.counts.end()), 1100);
  Reading over = read_block(phantom.ask("SPEC:SHUT OPEN;EXP 200 ms;AVER 1;READ?"));
  EXPECT_EQ(over.full, 1);
  EXPECT_EQ(*std::max_element(over.counts.begin(), over.counts.end()), 65535);
}

TEST_F(PhantomWire, ReadingTakesExposureTimesFramesAndTheLinesTime) {
  const double line_s = 2080 * 10.0 / 921600;
  phantom.ask("SPEC:EXP 20 ms;AVER 4;AVER?");
  EXPECT_NEAR(timed("SPEC:READ?"), 0.082 + line_s, 0.005);
  EXPECT_NEAR(timed("SPEC:SHUT CLOS;SHUT?"), 0.020, 0.003);
  EXPECT_LT(timed("SPEC:SHUT CLOS;SHUT?"), 0.002);
}

TEST_F(PhantomWire, SpectrometerSettingsHaveBounds) {
  EXPECT_EQ(phantom.ask("SPEC:EXP 0.001;EXP?"), "0.001");
  EXPECT_EQ(phantom.ask("SPEC:EXP 2;EXP?"), "2");
  EXPECT_EQ(phantom.ask("SPEC:EXP 0.0123456789;EXP?"), "0.012346");  // steps of 1 us
  EXPECT_EQ(phantom.error_of("SPEC:EXP 0.0009"), -222);
  EXPECT_EQ(phantom.error_of("SPEC:EXP 2.1"), -222);
  EXPECT_EQ(phantom.ask("SPEC:EXP?"), "0.012346");  // out of range changes nothing
  EXPECT_EQ(phantom.ask("SPEC:AVER 64;AVER?"), "64");
  EXPECT_EQ(phantom.error_of("SPEC:AVER 65"), -222);
  EXPECT_EQ(phantom.error_of("SPEC:AVER 2.5"), -224);
  EXPECT_EQ(phantom.error_of("SPEC:AVER OPEN"), -104);
  EXPECT_EQ(phantom.error_of("SPEC:AVER 1,2"), -108);
  EXPECT_EQ(phantom.error_of("SPEC:SHUT AJAR"), -224);
  EXPECT_EQ(phantom.error_of("SPEC:SHUT 1"), -104);
  EXPECT_EQ(phantom.error_of("SPEC:READ? 1"), -108);
  EXPECT_EQ(phantom.error_of("SPEC:READ"), -113);
  EXPECT_EQ(phantom.ask("SPEC:SHUT CLOSED;SHUT?"), "CLOS");
}

TEST_F(PhantomWire, TellsItsWavelengths) { EXPECT_EQ(phantom.ask("SPEC:WAV?"), "600,0.4402,-2e-07,-1e-10"); }

// --- 2.4 modulator, path, lamps

TEST_F(PhantomWire, ListsItsSetPoints) {
  EXPECT_EQ(phantom.ask("MOD:SETP:LIST?"), "1,0.4,0.01,0.025,2,1,0.01,0.01,3,1.6,0.016,0.01");
}

TEST_F(PhantomWire, ModulatorSettingsHaveBounds) {
  EXPECT_EQ(phantom.ask("MOD:SETP 3;SETP?"), "3");
  EXPECT_EQ(phantom.error_of("MOD:SETP 4"), -224);  // not stored
  EXPECT_EQ(phantom.error_of("MOD:SETP 10"), -222);
  EXPECT_EQ(phantom.ask("MOD:SETP?"), "3");
  EXPECT_EQ(phantom.ask("MOD:RATE 0.5;RATE?;RATE 10;RATE?"), "0.5;10");
  EXPECT_EQ(phantom.error_of("MOD:RATE 0.4"), -222);
  EXPECT_EQ(phantom.error_of("MOD:RATE 10.1"), -222);
  EXPECT_EQ(phantom.ask("MOD:DEPT:RED 0.1;INFR 0;RED?;INFR?"), "0.1;0");
  EXPECT_EQ(phantom.error_of("MOD:DEPT:RED 0.11"), -222);
  EXPECT_EQ(phantom.error_of("MOD:DEPT:INFR -0.01"), -222);
  EXPECT_EQ(phantom.error_of("MOD:STAT 2"), -224);
  EXPECT_EQ(phantom.error_of("MOD:STAT \"ON\""), -104);
  EXPECT_EQ(phantom.error_of("MOD:STAT MAYBE"), -224);
  EXPECT_EQ(phantom.error_of("MOD:STAT"), -109);
}

TEST_F(PhantomWire, SaysWhenTheOpticsHaveSettled) {
  for (const char* change : {"MOD:STAT ON", "MOD:SETP 1", "MOD:RATE 4", "MOD:DEPT:RED 0.02", "MOD:DEPT:INFR 0.02",
                             "PATH:OPAQ ON", "PATH:OPAQ OFF"}) {
    trial.wait_s(1.0);
    EXPECT_EQ(phantom.ask("MOD:SETT?"), "1") << change;
    phantom.ask(std::string(change) + ";:LID?");
    EXPECT_EQ(phantom.ask("MOD:SETT?"), "0") << change;
    trial.wait_s(0.151);
    EXPECT_EQ(phantom.ask("MOD:SETT?"), "1") << change;
  }
}

TEST_F(PhantomWire, BladeAndLampsTakeTheirTime) {
  EXPECT_NEAR(timed("PATH:OPAQ ON;OPAQ?"), 0.100, 0.003);
  EXPECT_LT(timed("PATH:OPAQ ON;OPAQ?"), 0.002);
  EXPECT_NEAR(timed("LINE:STAT ON;STAT?"), 0.050, 0.003);
  EXPECT_EQ(phantom.ask("LAMP:STAT 1;STAT?;LEV 0.25;LEV?;FLIC 120 HZ;FLIC?"), "1;0.25;120");
  EXPECT_EQ(phantom.error_of("LAMP:FLIC 50"), -224);
  EXPECT_EQ(phantom.error_of("LAMP:FLIC 121"), -222);
  EXPECT_EQ(phantom.error_of("LAMP:LEV 1.5"), -222);
}

TEST_F(PhantomWire, LineLampShowsItsLines) {
  EXPECT_EQ(phantom.ask("LINE:LIST?"), "696.543,763.511,811.531,912.297");
  const Reading lines = read_block(phantom.ask("LINE:STAT ON;:SPEC:AVER 16;READ?"));
  for (const double nm : {696.543, 763.511, 811.531, 912.297}) {
    const auto pixel = static_cast<std::size_t>(std::lround((nm - 600.0) / 0.4400));
    const auto peak = std::max_element(lines.counts.begin() + static_cast<long>(pixel) - 6,
                                       lines.counts.begin() + static_cast<long>(pixel) + 6);
    EXPECT_GT(*peak, 6000) << nm;
    EXPECT_EQ(lines.full, 0);
  }
}

// --- 2.5 nest

TEST_F(PhantomWire, TellsTheStateOfTheNest) {
  EXPECT_EQ(phantom.ask("PROB?;PROB:COUN?;:LID?"), "0;0;CLOS");
  ASSERT_TRUE(trial.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  ASSERT_TRUE(trial.bench.lid(1, true));
  EXPECT_EQ(phantom.ask("PROB?;PROB:COUN?;:LID?"), "1;1;OPEN");
  ASSERT_TRUE(trial.bench.remove(1));
  ASSERT_TRUE(trial.bench.seat(1, "AQ20-048-00002", "AQ-20"));
  EXPECT_EQ(phantom.ask("PROB?;PROB:COUN?"), "1;2");
  ASSERT_TRUE(trial.bench.restart(phantom1));
  EXPECT_EQ(phantom.ask("PROB?;PROB:COUN?"), "1;0");  // since power-on
}

TEST_F(PhantomWire, TellsTheTemperature) {
  trial.bench.room(31.5);
  const std::string text = phantom.ask("TEMP?");
  EXPECT_EQ(text.size() - text.find('.'), 3u);
  EXPECT_NEAR(parse_double(text).value(), 31.5, 0.06);
}

TEST_F(PhantomWire, UnknownHeadersAndRubbish) {
  EXPECT_EQ(phantom.error_of("SPEC:NOTHING"), -113);
  EXPECT_EQ(phantom.error_of("TEMP"), -113);
  EXPECT_EQ(phantom.error_of("LID? 1"), -108);
  EXPECT_EQ(phantom.error_of("%"), -101);
  EXPECT_EQ(phantom.error_of("SPEC:EXP ,"), -102);
}

TEST_F(PhantomWire, SurvivesRandomBytes) {
  Deviates deviates(8);
  for (int i = 0; i < 200; ++i) {
    std::string bytes;
    for (int k = 0; k < 100; ++k) bytes.push_back(static_cast<char>(deviates.bits() & 0xFF));
    phantom.send(bytes + "\n");
  }
  phantom.receive(2.0);
  EXPECT_EQ(phantom.ask("*CLS;SYST:ERR?"), "0,\"No error\"");
}

}  // namespace
}  // namespace probewright::emulated
