#include "station/measure/capture_format.h"

#include <bit>
#include <cmath>
#include <stdexcept>

#include "station/base/numbers.h"

namespace probewright::measure {
namespace {

enum class Kind : std::uint8_t {
  electrical = 1,
  dark = 2,
  spectrum = 3,
  pulses = 4,
  red_alone = 5,
  closed_path = 6,
  ambient = 7,
  alone_slots = 8
};
constexpr std::uint8_t version = 1;
constexpr std::uint32_t most_cycles = 65536;
constexpr std::int32_t code_limit = 1 << 23;

/// Appends little-endian fields.
class Writer {
 public:
  void number(std::uint64_t value, int bytes) {
    for (int i = 0; i < bytes; ++i) out_.push_back(static_cast<std::byte>(value >> (8 * i)));
  }
  void real(double value) {
    if (!std::isfinite(value)) throw std::invalid_argument("a capture holds a value that is not finite");
    number(std::bit_cast<std::uint64_t>(value), 8);
  }
  void code(std::int32_t value) {
    if (value < -code_limit || value >= code_limit) throw std::invalid_argument("a converter code beyond 24 bit");
    number(static_cast<std::uint32_t>(value), 3);
  }
  Bytes take() { return std::move(out_); }

 private:
  Bytes out_;
};

/// Reads little-endian fields. After the first trouble everything reads as 0 and `trouble` tells what it was.
class Reader {
 public:
  explicit Reader(std::span<const std::byte> bytes) : bytes_(bytes) {}

  std::uint64_t number(int count) {
    if (bytes_.size() - at_ < static_cast<std::size_t>(count)) refuse("the bytes end too early");
    if (refused()) return 0;
    std::uint64_t value = 0;
    for (int i = 0; i < count; ++i)
      value |= std::to_integer<std::uint64_t>(bytes_[at_ + static_cast<std::size_t>(i)]) << (8 * i);
    at_ += static_cast<std::size_t>(count);
    return value;
  }
  double real() {
    const double value = std::bit_cast<double>(number(8));
    if (!std::isfinite(value)) return refuse("a value is not finite"), 0.0;
    return value;
  }
  double positive() {
    const double value = real();
    if (!(value > 0.0)) refuse("a value that must be above 0 is not");
    return value;
  }
  std::int32_t code() {
    const auto value = static_cast<std::int32_t>(number(3));
    return value >= code_limit ? value - 2 * code_limit : value;
  }
  void refuse(std::string_view why) {
    if (refused()) return;
    trouble_ = why, trouble_at_ = at_;
  }
  bool refused() const { return !trouble_.empty(); }
  std::size_t left() const { return bytes_.size() - at_; }
  void finish() {
    if (left() != 0) refuse("bytes follow after the last field");
  }
  Problem problem(std::string_view where) const {
    return {"capture_malformed", where, {{"reason", trouble_}, {"offset", std::to_string(trouble_at_)}}};
  }

 private:
  std::span<const std::byte> bytes_;
  std::size_t at_ = 0, trouble_at_ = 0;
  std::string trouble_;
};

constexpr unsigned bit(int n) { return 1u << n; }
constexpr bool has(std::uint64_t flags, int n) { return (flags >> n & 1u) != 0; }

void write(Writer& w, const ForwardVoltage& v) { w.real(v.set_mA), w.real(v.delivered_mA), w.real(v.voltage_V); }

ForwardVoltage read_voltage(Reader& r, bool at_compliance) {
  ForwardVoltage v;
  v.set_mA = r.real(), v.delivered_mA = r.real(), v.voltage_V = r.real(), v.at_compliance = at_compliance;
  return v;
}

void write(Writer& w, const LedElectrical& led) {
  unsigned flags = 0;
  if (led.at_drive) flags |= bit(0) | (led.at_drive->at_compliance ? bit(1) : 0);
  if (led.at_quarter) flags |= bit(2) | (led.at_quarter->at_compliance ? bit(3) : 0);
  if (led.first_voltage_V) flags |= bit(4);
  if (led.warm_voltage_V) flags |= bit(5);
  if (led.reverse_leakage_uA) flags |= bit(6);
  w.number(flags, 1);
  if (led.at_drive) write(w, *led.at_drive);
  if (led.at_quarter) write(w, *led.at_quarter);
  for (const auto& value : {led.first_voltage_V, led.warm_voltage_V, led.reverse_leakage_uA})
    if (value) w.real(*value);
}

LedElectrical read_led(Reader& r) {
  LedElectrical led;
  const auto flags = r.number(1);
  if (flags > 0x7F || (has(flags, 1) && !has(flags, 0)) || (has(flags, 3) && !has(flags, 2)))
    r.refuse("flags of an LED that have no meaning");
  if (has(flags, 0)) led.at_drive = read_voltage(r, has(flags, 1));
  if (has(flags, 2)) led.at_quarter = read_voltage(r, has(flags, 3));
  if (has(flags, 4)) led.first_voltage_V = r.real();
  if (has(flags, 5)) led.warm_voltage_V = r.real();
  if (has(flags, 6)) led.reverse_leakage_uA = r.real();
  return led;
}

Kind kind_of(const ElectricalCapture&) { return Kind::electrical; }
Kind kind_of(const DarkCapture&) { return Kind::dark; }
Kind kind_of(const SpectrumCapture&) { return Kind::spectrum; }
Kind kind_of(const PulseCapture&) { return Kind::pulses; }
Kind kind_of(const RedAloneCapture&) { return Kind::red_alone; }
Kind kind_of(const ClosedPathCapture&) { return Kind::closed_path; }
Kind kind_of(const AmbientCapture&) { return Kind::ambient; }
Kind kind_of(const AloneSlotsCapture&) { return Kind::alone_slots; }

void write(Writer& w, const ElectricalCapture& c) {
  if (c.id_open && c.id_resistance_ohm) throw std::invalid_argument("an open ID resistor with a resistance");
  unsigned flags = 0;
  if (c.present_phantom) flags |= bit(0) | (*c.present_phantom ? bit(1) : 0);
  if (c.present_adapter) flags |= bit(2) | (*c.present_adapter ? bit(3) : 0);
  if (c.id_resistance_ohm) flags |= bit(4);
  if (c.id_open) flags |= bit(5);
  if (c.mains_pickup_nA) flags |= bit(6);
  w.number(flags, 2), w.real(c.temperature_C);
  if (c.id_resistance_ohm) w.real(*c.id_resistance_ohm);
  if (c.mains_pickup_nA) w.real(*c.mains_pickup_nA);
  write(w, c.led.red), write(w, c.led.infrared);
}

ElectricalCapture read_electrical(Reader& r) {
  ElectricalCapture c;
  const auto flags = r.number(2);
  if (flags > 0x7F || (has(flags, 1) && !has(flags, 0)) || (has(flags, 3) && !has(flags, 2)) ||
      (has(flags, 4) && has(flags, 5)))
    r.refuse("flags that have no meaning");
  c.temperature_C = r.real();
  if (has(flags, 0)) c.present_phantom = has(flags, 1);
  if (has(flags, 2)) c.present_adapter = has(flags, 3);
  if (has(flags, 4)) c.id_resistance_ohm = r.real();
  c.id_open = has(flags, 5);
  if (has(flags, 6)) c.mains_pickup_nA = r.real();
  c.led.red = read_led(r), c.led.infrared = read_led(r);
  return c;
}

void write(Writer& w, const DarkCapture& c) {
  for (const double value :
       {c.connected_nA, c.open_nA, c.connected_sd_nA, c.open_sd_nA, c.bias_V, c.averaged_s, c.temperature_C})
    w.real(value);
}

DarkCapture read_dark(Reader& r) {
  DarkCapture c;
  for (double* value :
       {&c.connected_nA, &c.open_nA, &c.connected_sd_nA, &c.open_sd_nA, &c.bias_V, &c.averaged_s, &c.temperature_C})
    *value = r.real();
  return c;
}

void write(Writer& w, const SpectrumCapture& c) {
  if (c.frames < 1 || c.frames > 65535) throw std::invalid_argument("number of frames beyond 16 bit");
  if (!(c.exposure_s > 0.0)) throw std::invalid_argument("an exposure that is not above 0");
  w.number(c.band == Band::red ? 0 : 1, 1), w.number(c.pixel_was_full ? 1 : 0, 1);
  w.number(static_cast<std::uint64_t>(c.frames), 2);
  w.real(c.exposure_s), w.real(c.drive_mA), w.real(c.temperature_C);
  w.number(spectrometer_pixels, 2);
  for (const auto counts : c.light) w.number(counts, 2);
  for (const auto counts : c.dark) w.number(counts, 2);
}

SpectrumCapture read_spectrum(Reader& r) {
  SpectrumCapture c;
  const auto band = r.number(1), full = r.number(1), frames = r.number(2);
  if (band > 1 || full > 1 || frames == 0) r.refuse("band, full mark or number of frames out of range");
  c.band = band == 0 ? Band::red : Band::infrared;
  c.pixel_was_full = full == 1;
  c.frames = static_cast<int>(frames);
  c.exposure_s = r.positive(), c.drive_mA = r.real(), c.temperature_C = r.real();
  if (r.number(2) != spectrometer_pixels) r.refuse("the number of pixels is not 1024");
  for (auto& counts : c.light) counts = static_cast<std::uint16_t>(r.number(2));
  for (auto& counts : c.dark) counts = static_cast<std::uint16_t>(r.number(2));
  return c;
}

/// Number of the first cycle kept, number of cycles, then all four slots cycle by cycle.
template <class Capture>
void write_slots(Writer& w, const Capture& c) {
  const std::size_t n = c.red.size();
  if (c.dark_a.size() != n || c.infrared.size() != n || c.dark_b.size() != n || n > most_cycles)
    throw std::invalid_argument("trains of unequal length or too long");
  w.number(c.first_cycle, 4), w.number(n, 4);
  for (std::size_t i = 0; i < n; ++i)
    for (const auto* train : {&c.red, &c.dark_a, &c.infrared, &c.dark_b}) w.code((*train)[i]);
}

template <class Capture>
void read_slots(Reader& r, Capture& c) {
  c.first_cycle = static_cast<std::uint32_t>(r.number(4));
  const auto n = r.number(4);
  // The size is checked before anything is allocated: a damaged count must not ask for gigabytes.
  if (n > most_cycles || r.left() != n * 12) r.refuse("the number of cycles does not agree with the bytes");
  if (r.refused()) return;
  for (std::uint64_t i = 0; i < n; ++i)
    for (auto* train : {&c.red, &c.dark_a, &c.infrared, &c.dark_b}) train->push_back(r.code());
}

/// Cycle, drive and temperature, which stand before the slots.
template <class Capture>
void write_conditions(Writer& w, const Capture& c) {
  if (!(c.cycle_s > 0.0)) throw std::invalid_argument("a cycle that is not above 0");
  w.real(c.cycle_s), w.real(c.drive_mA.red), w.real(c.drive_mA.infrared), w.real(c.temperature_C);
}
template <class Capture>
void read_conditions(Reader& r, Capture& c) {
  c.cycle_s = r.positive();
  c.drive_mA.red = r.real(), c.drive_mA.infrared = r.real(), c.temperature_C = r.real();
}

void write(Writer& w, const PulseCapture& c) {
  if (!(c.set_point_ratio > 0.0) || !(c.modulator_Hz > 0.0))
    throw std::invalid_argument("a set point or rate that is not above 0");
  w.real(c.set_point_ratio), w.real(c.modulator_Hz);
  write_conditions(w, c), write_slots(w, c);
}

PulseCapture read_pulses(Reader& r) {
  PulseCapture c;
  c.set_point_ratio = r.positive(), c.modulator_Hz = r.positive();
  read_conditions(r, c), read_slots(r, c);
  return c;
}

void write(Writer& w, const RedAloneCapture& c) {
  if (c.spectrum.band != Band::red) throw std::invalid_argument("a spectrum of the red LED that is not red");
  write(w, c.spectrum);
}

RedAloneCapture read_red_alone(Reader& r) {
  RedAloneCapture c{read_spectrum(r)};
  if (c.spectrum.band != Band::red) r.refuse("the spectrum of the red LED is not red");
  return c;
}

void write(Writer& w, const ClosedPathCapture& c) { write_conditions(w, c), write_slots(w, c); }

ClosedPathCapture read_closed_path(Reader& r) {
  ClosedPathCapture c;
  read_conditions(r, c), read_slots(r, c);
  return c;
}

void write(Writer& w, const AloneSlotsCapture& c) {
  w.number(c.lit == Band::red ? 0 : 1, 1);
  write_conditions(w, c), write_slots(w, c);
}

AloneSlotsCapture read_alone_slots(Reader& r) {
  AloneSlotsCapture c;
  const auto band = r.number(1);
  if (band > 1) r.refuse("band out of range");
  c.lit = band == 0 ? Band::red : Band::infrared;
  read_conditions(r, c), read_slots(r, c);
  return c;
}

void write(Writer& w, const AmbientCapture& c) {
  const std::size_t lit = c.lit_a.size(), unlit = c.unlit_a.size();
  if (c.lit_b.size() != lit || c.unlit_b.size() != unlit || lit > most_cycles || unlit > most_cycles)
    throw std::invalid_argument("trains of unequal length or too long");
  if (!(c.lamp_level > 0.0) || !(c.cycle_s > 0.0) || c.flicker_Hz < 0.0)
    throw std::invalid_argument("a lamp or a cycle that is not above 0");
  w.real(c.lamp_level), w.real(c.flicker_Hz), w.real(c.cycle_s), w.real(c.temperature_C);
  w.number(lit, 4), w.number(unlit, 4);
  for (std::size_t i = 0; i < lit; ++i) w.code(c.lit_a[i]), w.code(c.lit_b[i]);
  for (std::size_t i = 0; i < unlit; ++i) w.code(c.unlit_a[i]), w.code(c.unlit_b[i]);
}

AmbientCapture read_ambient(Reader& r) {
  AmbientCapture c;
  c.lamp_level = r.positive(), c.flicker_Hz = r.real(), c.cycle_s = r.positive(), c.temperature_C = r.real();
  if (c.flicker_Hz < 0.0) r.refuse("a flicker below 0");
  const auto lit = r.number(4), unlit = r.number(4);
  if (lit > most_cycles || unlit > most_cycles || r.left() != (lit + unlit) * 6)
    r.refuse("the number of cycles does not agree with the bytes");
  if (r.refused()) return c;
  for (std::uint64_t i = 0; i < lit; ++i) c.lit_a.push_back(r.code()), c.lit_b.push_back(r.code());
  for (std::uint64_t i = 0; i < unlit; ++i) c.unlit_a.push_back(r.code()), c.unlit_b.push_back(r.code());
  return c;
}

AnyCapture read_any(Reader& r) {
  const auto mark = r.number(2), kind = r.number(1), found = r.number(1);
  if (mark != 0x4350) r.refuse("the bytes do not begin as a capture");
  if (found != version) r.refuse("an unknown version of the format");
  if (r.refused()) return DarkCapture{};
  switch (static_cast<Kind>(kind)) {
    case Kind::electrical:
      return read_electrical(r);
    case Kind::dark:
      return read_dark(r);
    case Kind::spectrum:
      return read_spectrum(r);
    case Kind::pulses:
      return read_pulses(r);
    case Kind::red_alone:
      return read_red_alone(r);
    case Kind::closed_path:
      return read_closed_path(r);
    case Kind::ambient:
      return read_ambient(r);
    case Kind::alone_slots:
      return read_alone_slots(r);
  }
  r.refuse("an unknown kind of capture");
  return DarkCapture{};
}

std::string ratio_slug(double ratio) {
  std::string text = fixed(ratio, 1);
  if (const auto point = text.find('.'); point != std::string::npos) text[point] = 'p';
  return text;
}

/// Voltages of the LEDs and nothing else of the probe.
bool holds_leds_alone(const ElectricalCapture& c) {
  const bool other = c.present_phantom || c.present_adapter || c.id_resistance_ohm || c.id_open || c.mains_pickup_nA;
  return !other && (c.led.red.at_drive || c.led.red.at_quarter || c.led.infrared.at_drive || c.led.infrared.at_quarter);
}

/// Takes over what `into` lacks; false when both have it.
template <class Value>
bool take_over(std::optional<Value>& into, const std::optional<Value>& from) {
  if (into && from) return false;
  if (from) into = from;
  return true;
}

bool take_over(LedElectrical& into, const LedElectrical& from) {
  bool fresh = take_over(into.at_drive, from.at_drive);
  fresh &= take_over(into.at_quarter, from.at_quarter);
  fresh &= take_over(into.first_voltage_V, from.first_voltage_V);
  fresh &= take_over(into.warm_voltage_V, from.warm_voltage_V);
  return take_over(into.reverse_leakage_uA, from.reverse_leakage_uA) && fresh;
}

/// False when both captures hold the same field; `into` is then not to be used.
bool take_over(ElectricalCapture& into, const ElectricalCapture& from) {
  const auto asked = [](const ElectricalCapture& c) { return c.id_open || c.id_resistance_ohm; };
  bool fresh = !(asked(into) && asked(from));
  into.id_open |= from.id_open;
  fresh &= take_over(into.id_resistance_ohm, from.id_resistance_ohm);
  fresh &= take_over(into.present_phantom, from.present_phantom);
  fresh &= take_over(into.present_adapter, from.present_adapter);
  fresh &= take_over(into.mains_pickup_nA, from.mains_pickup_nA);
  for (const Band band : {Band::red, Band::infrared}) fresh &= take_over(into.led.of(band), from.led.of(band));
  into.temperature_C = from.temperature_C;
  return fresh;
}

struct Names {
  std::string operator()(const ElectricalCapture& c) const {
    return holds_leds_alone(c) ? "electrical_driven" : "electrical";
  }
  std::string operator()(const DarkCapture&) const { return "dark"; }
  std::string operator()(const SpectrumCapture& c) const { return std::string{slug(c.band)} + "_spectrum"; }
  std::string operator()(const PulseCapture& c) const { return "pulses_" + ratio_slug(c.set_point_ratio); }
  std::string operator()(const RedAloneCapture&) const { return "red_alone_spectrum"; }
  std::string operator()(const ClosedPathCapture&) const { return "closed_path"; }
  std::string operator()(const AmbientCapture&) const { return "ambient"; }
  std::string operator()(const AloneSlotsCapture& c) const { return std::string{slug(c.lit)} + "_alone_slots"; }
};

template <class Capture>
Result<void> put(std::optional<Capture>& place, Capture capture, const std::string& kind) {
  if (place) return Problem{"capture_twice", "", {{"kind", kind}}};
  place = std::move(capture);
  return {};
}

}  // namespace

std::string capture_kind(const AnyCapture& capture) { return std::visit(Names{}, capture); }

Bytes encode(const AnyCapture& capture) {
  Writer w;
  w.number(0x4350, 2);
  w.number(static_cast<std::uint64_t>(std::visit([](const auto& c) { return kind_of(c); }, capture)), 1);
  w.number(version, 1);
  std::visit([&w](const auto& c) { write(w, c); }, capture);
  return w.take();
}

Result<AnyCapture> decode(std::span<const std::byte> bytes, std::string_view where) {
  Reader r{bytes};
  AnyCapture capture = read_any(r);
  r.finish();
  if (r.refused()) return r.problem(where);
  return capture;
}

const PulseCapture* Captures::pulse(double ratio) const {
  for (const PulseCapture& capture : pulses)
    if (std::abs(capture.set_point_ratio - ratio) < 1e-6) return &capture;
  return nullptr;
}

std::vector<AnyCapture> all_captures(const Captures& captures) {
  std::vector<AnyCapture> all;
  if (captures.electrical) all.emplace_back(*captures.electrical);
  if (captures.dark) all.emplace_back(*captures.dark);
  if (captures.red_spectrum) all.emplace_back(*captures.red_spectrum);
  if (captures.infrared_spectrum) all.emplace_back(*captures.infrared_spectrum);
  for (const PulseCapture& pulse : captures.pulses) all.emplace_back(pulse);
  if (captures.red_alone) all.emplace_back(*captures.red_alone);
  if (captures.closed_path) all.emplace_back(*captures.closed_path);
  if (captures.ambient) all.emplace_back(*captures.ambient);
  for (const Band lit : {Band::red, Band::infrared})
    if (const auto& alone = captures.alone_slots.of(lit)) all.emplace_back(*alone);
  return all;
}

Result<void> add_capture(Captures& captures, AnyCapture capture) {
  const std::string kind = capture_kind(capture);
  if (auto* electrical = std::get_if<ElectricalCapture>(&capture)) {
    ElectricalCapture both = captures.electrical.value_or(ElectricalCapture{});
    if (!take_over(both, *electrical)) return Problem{"capture_twice", "", {{"kind", kind}}};
    captures.electrical = both;
    return {};
  }
  if (auto* dark = std::get_if<DarkCapture>(&capture)) return put(captures.dark, std::move(*dark), kind);
  if (auto* spectrum = std::get_if<SpectrumCapture>(&capture))
    return put(spectrum->band == Band::red ? captures.red_spectrum : captures.infrared_spectrum, std::move(*spectrum),
               kind);
  if (auto* alone = std::get_if<RedAloneCapture>(&capture)) return put(captures.red_alone, std::move(*alone), kind);
  if (auto* closed = std::get_if<ClosedPathCapture>(&capture))
    return put(captures.closed_path, std::move(*closed), kind);
  if (auto* ambient = std::get_if<AmbientCapture>(&capture)) return put(captures.ambient, std::move(*ambient), kind);
  if (auto* alone = std::get_if<AloneSlotsCapture>(&capture)) {
    auto& place = captures.alone_slots.of(alone->lit);
    return put(place, std::move(*alone), kind);
  }
  auto& pulse = std::get<PulseCapture>(capture);
  for (const PulseCapture& there : captures.pulses)
    if (capture_kind(there) == kind) return Problem{"capture_twice", "", {{"kind", kind}}};
  captures.pulses.push_back(std::move(pulse));
  return {};
}

}  // namespace probewright::measure
