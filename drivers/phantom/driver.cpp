#include "drivers/phantom/driver.h"

#include <cmath>

#include "drivers/phantom/answers.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/message.h"
#include "station/base/numbers.h"

namespace probewright::phantom {
namespace {

using std::chrono::milliseconds;

constexpr std::size_t longest_line = 8192;
constexpr std::size_t spectrum_answer_bytes = 7 + 2068 + 5 + 1;
constexpr int longest_error_queue = 20;  // the device holds 16
// Device times of WIRE.md.
constexpr Duration longest_answer_delay = milliseconds(5);
constexpr Duration shutter_time = milliseconds(20);
constexpr Duration blade_time = milliseconds(100);
constexpr Duration line_lamp_time = milliseconds(50);
constexpr Duration settling_time = milliseconds(150);
constexpr Duration self_test_time = milliseconds(200);
constexpr Duration spectrum_overhead = milliseconds(2);

std::span<const std::byte> bytes_of(const std::string& text) { return std::as_bytes(std::span{text}); }

std::string on_off(bool on) { return on ? "ON" : "OFF"; }
std::string truth(bool on) { return on ? "1" : "0"; }

/// Errors that noise on the line makes, or that hide others: the request is asked again.
bool is_noise(int number) { return number == -360 || number == -363 || number == -350; }
/// The device itself is at fault rather than the request: hardware and system errors.
bool is_fault(int number) { return (number <= -240 && number > -260) || (number <= -300 && number > -400); }

/// Whether two wavelength polynomials agree everywhere on the pixels to 0.0001 nm.
bool same_polynomial(const std::vector<double>& a, const std::vector<double>& b) {
  double scale = 1.0;
  for (std::size_t k = 0; k < std::max(a.size(), b.size()); ++k, scale *= static_cast<double>(pixels - 1)) {
    const double difference = (k < a.size() ? a[k] : 0.0) - (k < b.size() ? b[k] : 0.0);
    if (!(std::abs(difference) * scale <= 1e-4)) return false;
  }
  return true;
}

/// Empty lines are no answers: a doubled LF makes one. "" when no whole line is there.
std::string first_line_with_text(wire::LineReader& reader) {
  std::string text;
  while (text.empty()) {
    std::optional<std::string> line = reader.next();
    if (!line) break;
    text = std::move(*line);
  }
  return text;
}

std::string in_words(const std::vector<double>& polynomial) {
  std::string words;
  for (const double coefficient : polynomial) words += (words.empty() ? "" : ", ") + shortest(coefficient);
  return words;
}

}  // namespace

Driver::Driver(Settings settings, wire::PortSource source, wire::LineClock& clock, Entropy& entropy)
    : settings_(std::move(settings)), link_(settings_.link, std::move(source), clock), entropy_(entropy) {}

// --- one exchange

template <class T>
asio::awaitable<T> Driver::ask(Request request, Read<T> read) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_return co_await ask_in_turn<T>(std::move(request), std::move(read));
}

template <class T>
asio::awaitable<T> Driver::ask_in_turn(Request request, Read<T> read) {
  co_return co_await link_.tried<T>([&] { return ask_once<T>(request, read); });
}

template <class T>
asio::awaitable<T> Driver::ask_once(const Request& request, const Read<T>& read) {
  if (unsure_) co_await make_sure(request.message);
  unsure_ = true;
  unsure_message_ = request.message;
  unsure_busy_ = request.busy + link_.transfer_time(request.answer);
  const std::string answer = co_await answer_to(request);
  T value = read(answer);
  unsure_ = false;
  co_return value;
}

asio::awaitable<std::string> Driver::answer_to(const Request& request) {
  using Blocks = wire::LineReader::Blocks;
  const std::string line = wire::add_checksum(request.message);
  const auto deadline = link_.deadline(request.busy + longest_answer_delay, line.size() + request.answer);
  co_await link_.send(bytes_of(line), deadline);
  wire::LineReader reader{longest_line, request.block ? Blocks::inside : Blocks::none};
  const std::string answer = co_await next_line(reader, deadline);
  auto text = wire::strip_checksum(answer);
  if (!text) throw wire::Miss(text.error().what());
  co_return *std::move(text);
}

asio::awaitable<std::string> Driver::next_line(wire::LineReader& reader, SteadyTime deadline) {
  for (;;) {
    std::string line = first_line_with_text(reader);
    if (!line.empty()) co_return line;
    const auto bytes = co_await link_.receive(deadline);
    reader.feed(bytes);
  }
}

asio::awaitable<void> Driver::change(std::string message, std::vector<std::string> want, Duration busy) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_await change_in_turn(std::move(message), std::move(want), busy);
}

asio::awaitable<void> Driver::change_in_turn(std::string message, std::vector<std::string> want, Duration busy) {
  Request request{std::move(message), busy};
  Read<bool> as_set = [&want](std::string_view text) {
    const auto answers = read_answers(text, want.size());
    for (std::size_t i = 0; i < want.size(); ++i)
      if (!same_setting(answers[i], want[i])) throw wire::Miss("set " + want[i] + ", read back " + answers[i]);
    return true;
  };
  co_await ask_in_turn<bool>(std::move(request), std::move(as_set));
}

// --- after a miss

asio::awaitable<void> Driver::make_sure(const std::string& message) {
  co_await link_.tried<void>([this] { return fence(); });
  co_await empty_error_queue(message);
}

asio::awaitable<void> Driver::fence() {
  ++link_.counts().fences;
  const std::string echo = wire::quoted(nonce());
  const std::string line = "\n" + wire::add_checksum("SYST:ECHO? " + echo);  // LF: ends what may be half a message
  std::string want = wire::add_checksum(echo);
  want.pop_back();
  const auto deadline = link_.deadline(unsure_busy_ + longest_answer_delay, 2 * line.size());
  co_await link_.send(bytes_of(line), deadline);
  wire::LineReader reader{longest_line};
  for (;;) {
    const std::string found = co_await next_line(reader, deadline);
    // What stands before the echo in its line is the rest of an answer that lost its LF.
    if (found.ends_with(want)) break;
    if (found == echo) throw wire::DeviceReset(settings_.link.device);  // checksums are off: only power-on does that
  }
  unsure_busy_ = Duration{0};
}

asio::awaitable<void> Driver::empty_error_queue(const std::string& message) {
  const Request next_error{"SYST:ERR?"};
  std::optional<DeviceError> refusal;
  for (int n = 0; n < longest_error_queue; ++n) {
    const std::string answer = co_await answer_to(next_error);
    const DeviceError error = read_error(answer);
    if (error.number == 0) {
      unsure_ = false;
      // Errors of another request, whose caller no longer waits, concern nobody now.
      if (refusal && unsure_message_ == message) throw ProblemError(refused(message, refusal->number, refusal->words));
      co_return;
    }
    if (!is_noise(error.number) && !refusal) refusal = error;
  }
  throw wire::Miss("the error queue does not become empty");
}

Problem Driver::refused(const std::string& message, int number, const std::string& words) const {
  return Problem{is_fault(number) ? "device_fault" : "device_refused",
                 settings_.link.device,
                 {{"request", message}, {"words", std::to_string(number) + " " + words}}};
}

std::string Driver::nonce() {
  constexpr std::string_view digits = "0123456789ABCDEF";
  const std::uint64_t bits = entropy_.next();
  std::string text(8, '0');
  for (std::size_t i = 0; i < 8; ++i) text[i] = digits[bits >> (4 * i) & 0xFu];
  return text;
}

// --- connecting

asio::awaitable<void> Driver::connect() {
  const auto turn = co_await link_.turn();
  if (link_.ready()) co_return;
  try {
    co_await connect_in_turn();
  } catch (const ProblemError& refusal) {
    link_.note_trouble(refusal.problem());
    throw;
  }
}

asio::awaitable<void> Driver::keep_connected() {
  return link_.keep([this] { return connect(); });
}

asio::awaitable<void> Driver::connect_in_turn() {
  const wire::Link::Opening opening{link_};
  co_await link_.open();
  co_await link_.tried<void>([this] { return switch_checksums_on(); });
  unsure_ = true;
  unsure_message_.clear();
  unsure_busy_ = Duration{0};
  co_await introduce();
  spectrometer_.reset();
  last_spectrum_.reset();
  co_await change_in_turn("*RST;*OPC?", {"1"}, blade_time + settling_time);
  spectrometer_ = SpectrometerSetting{};
  link_.found();
}

asio::awaitable<void> Driver::switch_checksums_on() {
  const std::string line = "\n" + wire::add_checksum("SYST:CHEC ON;CHEC?");
  const auto deadline = link_.deadline(longest_answer_delay, line.size() + 16);
  co_await link_.send(bytes_of(line), deadline);
  wire::LineReader reader{longest_line};
  for (;;) {
    const std::string found = co_await next_line(reader, deadline);
    const auto text = wire::strip_checksum(found);
    if (text && *text == "1") co_return;
  }
}

asio::awaitable<void> Driver::introduce() {
  const auto& device = settings_.link.device;
  wire::Identity found;
  Read<bool> who = [&found](std::string_view text) {
    const auto answers = read_answers(text, 2);
    read_identity(answers[0], found);
    found.boot = static_cast<std::uint32_t>(read_whole(answers[1], 1, 2147483647));
    return true;
  };
  Request who_are_you{"*IDN?;:SYST:BOOT?"};
  who_are_you.answer = 128;
  co_await ask_in_turn<bool>(std::move(who_are_you), std::move(who));
  Read<bool> certificate = [&found](std::string_view text) {
    const auto answers = read_answers(text, 2);
    found.certificate = read_string(answers[0]);
    found.due = read_string(answers[1]);
    return true;
  };
  co_await ask_in_turn<bool>(Request{"CERT:NUMB?;DUE?"}, std::move(certificate));
  if (auto problem = wire::stranger(found, settings_.expected, "PHANTOM", link_.clock().speed(), device))
    throw ProblemError(*std::move(problem));
  Request wavelengths{"SPEC:WAV?"};
  wavelengths.answer = 128;
  Read<std::vector<double>> numbers = read_numbers;
  const std::vector<double> polynomial =
      co_await ask_in_turn<std::vector<double>>(std::move(wavelengths), std::move(numbers));
  if (!same_polynomial(polynomial, settings_.wavelength_nm))
    throw ProblemError(Problem{"device_wrong_wavelengths",
                               device,
                               {{"found", in_words(polynomial)}, {"expected", in_words(settings_.wavelength_nm)}}});
  identity_ = std::move(found);
}

// --- functions of the device

asio::awaitable<void> Driver::reset() {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  spectrometer_.reset();
  co_await change_in_turn("*RST;*OPC?", {"1"}, blade_time + settling_time);
  spectrometer_ = SpectrometerSetting{};
}

asio::awaitable<int> Driver::self_test() {
  Read<int> read = [](std::string_view text) { return static_cast<int>(read_whole(text, 0, 4)); };
  return ask<int>({"*TST?", self_test_time}, std::move(read));
}

asio::awaitable<void> Driver::set_spectrometer(SpectrometerSetting setting) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_await set_spectrometer_in_turn(setting);
}

asio::awaitable<void> Driver::set_spectrometer_in_turn(SpectrometerSetting setting) {
  if (spectrometer_ == setting) co_return;
  const bool moves = !spectrometer_ || spectrometer_->shutter != setting.shutter;
  const std::string exposure_s = fixed(1e-6 * setting.exposure_us, 6);
  const std::string frames = std::to_string(setting.frames);
  const std::string shutter = setting.shutter == Shutter::open ? "OPEN" : "CLOS";
  spectrometer_.reset();  // until read back: a refusal may leave half of it changed
  co_await change_in_turn("SPEC:EXP " + exposure_s + ";EXP?;AVER " + frames + ";AVER?;SHUT " + shutter + ";SHUT?",
                          {exposure_s, frames, shutter}, moves ? shutter_time : Duration{0});
  spectrometer_ = setting;
}

asio::awaitable<Spectrum> Driver::spectrum(SpectrometerSetting setting) {
  const auto turn = co_await link_.turn();
  link_.require_ready();
  co_await set_spectrometer_in_turn(setting);
  Request request{"SPEC:READ?"};
  request.busy = std::chrono::microseconds(setting.exposure_us) * setting.frames + spectrum_overhead;
  request.answer = spectrum_answer_bytes;
  request.block = true;
  Read<Spectrum> read = [this, setting](std::string_view text) {
    Spectrum spectrum = read_spectrum(text);
    if (spectrum.setting != setting) throw wire::Miss("the spectrum was taken with other settings");
    if (last_spectrum_ && spectrum.number <= *last_spectrum_) throw wire::Miss("an older spectrum came");
    return spectrum;
  };
  Spectrum spectrum = co_await ask_in_turn<Spectrum>(std::move(request), std::move(read));
  last_spectrum_ = spectrum.number;
  co_return spectrum;
}

asio::awaitable<void> Driver::modulate(Modulation modulation) {
  std::string message;
  std::vector<std::string> want;
  if (modulation.set_point == 0) {
    const std::string red = shortest(modulation.red_depth), infrared = shortest(modulation.infrared_depth);
    message = "MOD:DEPT:RED " + red + ";RED?;INFR " + infrared + ";INFR?;:";
    want = {red, infrared};
  }
  const std::string set_point = std::to_string(modulation.set_point), rate_Hz = shortest(modulation.rate_Hz);
  message += "MOD:SETP " + set_point + ";SETP?;RATE " + rate_Hz + ";RATE?;STAT ON;STAT?";
  want.insert(want.end(), {set_point, rate_Hz, "1"});
  return change(std::move(message), std::move(want));
}

asio::awaitable<void> Driver::stop_modulator() { return change("MOD:STAT OFF;STAT?", {"0"}); }

asio::awaitable<bool> Driver::settled() {
  Read<bool> read = read_truth;
  return ask<bool>({"MOD:SETT?"}, std::move(read));
}

asio::awaitable<void> Driver::wait_settled() { return change("*OPC?", {"1"}, settling_time); }

asio::awaitable<std::vector<SetPoint>> Driver::set_points() {
  Request request{"MOD:SETP:LIST?"};
  request.answer = 256;
  Read<std::vector<SetPoint>> read = read_set_points;
  return ask<std::vector<SetPoint>>(std::move(request), std::move(read));
}

asio::awaitable<void> Driver::set_opaque(bool opaque) {
  return change("PATH:OPAQ " + on_off(opaque) + ";OPAQ?", {truth(opaque)}, blade_time);
}

asio::awaitable<void> Driver::lamp_on(double level, int flicker_Hz) {
  const std::string how_bright = shortest(level), how_fast = std::to_string(flicker_Hz);
  return change("LAMP:LEV " + how_bright + ";LEV?;FLIC " + how_fast + ";FLIC?;STAT ON;STAT?",
                {how_bright, how_fast, "1"});
}

asio::awaitable<void> Driver::lamp_off() { return change("LAMP:STAT OFF;STAT?", {"0"}); }

asio::awaitable<void> Driver::set_line_lamp(bool on) {
  return change("LINE:STAT " + on_off(on) + ";STAT?", {truth(on)}, line_lamp_time);
}

asio::awaitable<std::vector<double>> Driver::line_lamp_nm() {
  Request request{"LINE:LIST?"};
  request.answer = 256;
  Read<std::vector<double>> read = read_numbers;
  return ask<std::vector<double>>(std::move(request), std::move(read));
}

asio::awaitable<double> Driver::temperature_degC() {
  Read<double> read = read_number;
  return ask<double>({"TEMP?"}, std::move(read));
}

asio::awaitable<bool> Driver::lid_closed() {
  Read<bool> read = read_closed;
  return ask<bool>({"LID?"}, std::move(read));
}

namespace {

Presence read_presence(std::string_view present, std::string_view insertions) {
  return {read_truth(present), static_cast<std::uint32_t>(read_whole(insertions, 0, 4294967295))};
}

}  // namespace

asio::awaitable<Presence> Driver::presence() {
  Read<Presence> read = [](std::string_view text) {
    const auto answers = read_answers(text, 2);
    return read_presence(answers[0], answers[1]);
  };
  return ask<Presence>({"PROB?;PROB:COUN?"}, std::move(read));
}

asio::awaitable<NestState> Driver::nest_state() {
  Read<NestState> read = [](std::string_view text) {
    const auto answers = read_answers(text, 3);
    return NestState{read_presence(answers[0], answers[1]), read_closed(answers[2])};
  };
  return ask<NestState>({"PROB?;PROB:COUN?;:LID?"}, std::move(read));
}

}  // namespace probewright::phantom
