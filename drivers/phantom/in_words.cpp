#include "drivers/phantom/in_words.h"

#include "drivers/phantom/answers.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/link.h"
#include "station/base/numbers.h"

namespace probewright::phantom {
namespace {

std::string printable(std::string text) {
  for (char& c : text) {
    if (static_cast<unsigned char>(c) < 0x20 || static_cast<unsigned char>(c) > 0x7e) c = '.';
  }
  return text;
}

std::string spectrum_words(const Spectrum& spectrum) {
  const SpectrometerSetting& setting = spectrum.setting;
  return "spectrum " + std::to_string(spectrum.number) + ": " + fixed(1e-3 * setting.exposure_us, 3) + " ms, " +
         std::to_string(setting.frames) + " frames, shutter " + (setting.shutter == Shutter::open ? "open" : "closed") +
         ", " + fixed(spectrum.temperature_degC, 2) + " degC" + (spectrum.any_pixel_full ? ", a pixel was full" : "");
}

std::string text_words(const std::string& text) {
  if (text.find('#') == std::string::npos) return printable(text);
  try {
    return spectrum_words(read_spectrum(text));
  } catch (const wire::Miss& miss) {
    return std::to_string(text.size()) + " bytes that are no spectrum: " + miss.what();
  }
}

}  // namespace

std::string in_words(const std::string& line) {
  if (!wire::has_checksum(line)) return text_words(line) + "   (no checksum)";
  const auto text = wire::strip_checksum(line);
  return text ? text_words(*text) : printable(line.substr(0, 200)) + "   (wrong checksum)";
}

std::vector<std::string> Listener::hear(std::span<const std::byte> bytes) {
  std::vector<std::string> heard;
  lines_.feed(bytes);
  while (const auto line = lines_.next()) {
    if (!line->empty() && *line != "\r") heard.push_back(in_words(*line));
  }
  if (lines_.overlong() > overlong_) heard.emplace_back("(a line without end)");
  overlong_ = lines_.overlong();
  return heard;
}

}  // namespace probewright::phantom
