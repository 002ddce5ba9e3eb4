#include <algorithm>
#include <variant>

#include "drivers/adapter/in_words.h"
#include "drivers/phantom/in_words.h"
#include "drivers/wire/recording_folder.h"
#include "station/base/numbers.h"
#include "station/text/recording.h"

namespace probewright::text {
namespace {

using Kind = wire::WireEvent::Kind;

/// One line of the page.
struct Told {
  Duration at{0};
  std::string device, way, words;
};

/// Turns the events of one device into messages.
class Interpreter {
 public:
  explicit Interpreter(const std::string& device) : device_(device) {
    if (!device.ends_with("-phantom")) {
      sent_ = adapter::Listener{};
      received_ = adapter::Listener{};
    }
  }

  void take(const wire::WireEvent& event, std::vector<Told>& page) {
    const bool out = event.kind == Kind::sent;
    if (out || event.kind == Kind::received) {
      for (std::string& words : hear(out ? sent_ : received_, event.bytes))
        page.push_back({event.at, device_, out ? ">" : "<", std::move(words)});
      return;
    }
    page.push_back({event.at, device_, "-", words_of(event)});
    *this = Interpreter{device_};  // what was half said is over
  }

 private:
  using Listener = std::variant<phantom::Listener, adapter::Listener>;
  static std::vector<std::string> hear(Listener& listener, const Bytes& bytes) {
    return std::visit([&](auto& who) { return who.hear(bytes); }, listener);
  }
  static std::string words_of(const wire::WireEvent& event) {
    if (event.kind == Kind::opened) return "the port " + event.words + " was opened";
    if (event.kind == Kind::lost) return "the port was lost: " + event.words;
    const auto problem = wire::problem_in_words(event.words);
    return "the port could not be opened: " + (problem ? problem->text() : event.words);
  }

  std::string device_;
  Listener sent_, received_;
};

std::string header_text(const Body& header) {
  std::string text;
  for (const auto& [key, value] : *header.object()) {
    if (value.string()) text += key + ": " + *value.string() + "\n";
    if (value.integer()) text += key + ": " + std::to_string(*value.integer()) + "\n";
    if (value.array()) text += key + ": " + std::to_string(value.array()->size()) + "\n";
    if (key == "cut") text += "cut: " + value.text("from") + " s to " + value.text("to") + " s\n";
  }
  return text;
}

std::string padded(std::string text, std::size_t width, bool right) {
  if (text.size() >= width) return text;
  const std::string blanks(width - text.size(), ' ');
  return right ? blanks + text : text + blanks;
}

}  // namespace

int recording_show(const RecordingShowOptions& options, Console& console) {
  const auto recording = wire::read_recording(options.folder);
  if (!recording) return console.refuse(recording.error());
  std::vector<Told> page;
  for (const wire::LineRecording& line : recording->lines) {
    if (!options.device.empty() && line.device != options.device) continue;
    Interpreter interpreter{line.device};
    for (const wire::WireEvent& event : line.events) interpreter.take(event, page);
  }
  std::stable_sort(page.begin(), page.end(), [](const Told& a, const Told& b) { return a.at < b.at; });
  std::erase_if(page, [&](const Told& told) {
    return seconds(told.at) < options.part.from_s || seconds(told.at) >= options.part.to_s;
  });
  std::size_t width = 0;
  for (const Told& told : page) width = std::max(width, told.device.size());
  console.print_text(header_text(recording->header) + "\n");
  for (const Told& told : page) {
    console.print(padded(fixed(seconds(told.at), 6), 12, true) + "  " + padded(told.device, width, false) + "  " +
                  told.way + " " + told.words);
  }
  return done;
}

}  // namespace probewright::text
