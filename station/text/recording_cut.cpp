#include "drivers/wire/recording_folder.h"
#include "station/text/recording.h"

namespace probewright::text {
namespace {

Duration limited(double time_s) { return from_seconds(std::min(time_s, 1e9)); }

}  // namespace

int recording_cut(const RecordingCutOptions& options, Console& console) {
  auto recording = wire::read_recording(options.folder);
  if (!recording) return console.refuse(recording.error());
  const Duration from = limited(options.part.from_s), to = limited(options.part.to_s);
  std::size_t events = 0;
  for (wire::LineRecording& line : recording->lines) {
    line = wire::cut(line, from, to);
    events += line.events.size();
  }
  Body::Object header = *recording->header.object();
  header["cut"] = Body::Object{{"from", wire::seconds_text(from)}, {"to", wire::seconds_text(to)}};
  recording->header = header;
  // The outcome is that of the whole run; a part has none.
  recording->files.erase("outcome.json");
  if (auto written = wire::write_recording(options.into, *recording); !written) return console.refuse(written.error());
  console.print(std::to_string(events) + " events in " + options.into);
  return done;
}

}  // namespace probewright::text
