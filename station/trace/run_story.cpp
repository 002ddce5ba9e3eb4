#include "station/trace/run_story.h"

#include <algorithm>
#include <cmath>

#include "db/queries/capture_bytes.h"
#include "db/queries/document.h"
#include "db/queries/entries.h"
#include "db/queries/seal.h"
#include "db/transaction.h"
#include "station/measure/capture_format.h"
#include "station/measure/pulses.h"
#include "station/measure/spectrum.h"

namespace probewright::trace {
namespace {

using measure::Band;

/// The phantom's certificate as the run used it; nothing where the ledger has none that can be read.
std::optional<measure::PhantomCertificate> certificate_of(db::Reader& reader, const db::RunRecord& run) {
  for (const db::NamedDocument& named : run.documents) {
    if (named.role != "phantom certificate") continue;
    const auto document = db::document_by_digest(reader, named.digest);
    if (!document) continue;
    if (auto certificate = measure::read_phantom_certificate(document->text, named.name)) return *certificate;
  }
  return std::nullopt;
}

std::optional<double> reading_of(const db::RunRecord& run, const std::string& check) {
  for (const db::ReadingRow& reading : run.readings)
    if (reading.check == check) return reading.value;
  return std::nullopt;
}

double wavelength_of(const measure::PhantomCertificate& certificate, double pixel) {
  double nm = 0.0;
  for (auto term = certificate.wavelength_nm.rbegin(); term != certificate.wavelength_nm.rend(); ++term)
    nm = nm * pixel + *term;
  return nm;
}

/// Counts over the dark frame: for a spectrum that is too bright or too dark for measure, but can still be looked at.
measure::Spectrum raw_spectrum(const measure::SpectrumCapture& capture,
                               const measure::PhantomCertificate& certificate) {
  measure::Spectrum raw;
  for (std::size_t pixel = 0; pixel < capture.light.size(); ++pixel) {
    raw.wavelength_nm.push_back(wavelength_of(certificate, static_cast<double>(pixel)));
    raw.power.push_back(static_cast<double>(capture.light[pixel]) - static_cast<double>(capture.dark[pixel]));
  }
  return raw;
}

/// The highest power in the window of the band; 0 where nothing stands above the dark.
double highest(const measure::Spectrum& spectrum, Band band) {
  const measure::Window window = measure::line_window(band);
  double most = 0.0;
  for (std::size_t i = 0; i < spectrum.power.size(); ++i)
    if (spectrum.wavelength_nm[i] >= window.from_nm && spectrum.wavelength_nm[i] <= window.to_nm)
      most = std::max(most, spectrum.power[i]);
  return most;
}

/// Draws into the story what captures show, one after the other.
class Drawing {
 public:
  Drawing(RunStory& story, std::optional<measure::PhantomCertificate> certificate)
      : story_(story), certificate_(std::move(certificate)) {}

  void take(const measure::AnyCapture& capture, const std::string& kind) {
    kind_ = kind;
    std::visit([this](const auto& one) { draw(one); }, capture);
  }

 private:
  template <class Other>
  void draw(const Other&) {}

  void draw(const measure::SpectrumCapture& capture) {
    if (!certificate_) return not_drawn("the ledger has no certificate of the phantom that can be read");
    const auto measured = measure::spectrum_of(capture, *certificate_);
    const measure::Spectrum spectrum = measured ? *measured : raw_spectrum(capture, *certificate_);
    if (!measured) not_drawn("raw counts are drawn: " + measured.error().what());
    const double most = highest(spectrum, capture.band);
    if (!(most > 0.0)) return not_drawn("there is no light above the dark frame");
    const std::string band{slug(capture.band)};
    SpectrumPlot plot{band, {}, {}, reading_of(story_.run, band + "_centroid")};
    const measure::Window window = measure::line_window(capture.band);  // beyond it is the other LED's light
    for (std::size_t i = 0; i < spectrum.power.size(); ++i) {
      if (spectrum.wavelength_nm[i] < window.from_nm || spectrum.wavelength_nm[i] > window.to_nm) continue;
      plot.wavelength_nm.push_back(spectrum.wavelength_nm[i]);
      plot.power.push_back(spectrum.power[i] / most);
    }
    story_.spectra.push_back(std::move(plot));
  }

  void draw(const measure::PulseCapture& capture) {
    const auto codes = [](const std::vector<std::int32_t>& train) {
      return std::vector<double>(train.begin(), train.end());
    };
    std::vector<double> start_s;
    for (std::size_t i = 0; i < capture.red.size(); ++i) start_s.push_back(static_cast<double>(i) * capture.cycle_s);
    const auto trains = measure::subtract_dark(codes(capture.red), codes(capture.dark_a), codes(capture.infrared),
                                               codes(capture.dark_b), start_s, capture.cycle_s);
    if (!trains) return not_drawn(trains.error().what());
    PulsePlot plot;
    plot.set_point_ratio = capture.set_point_ratio;
    const auto& red = trains->of(Band::red);
    const auto& infrared = trains->of(Band::infrared);
    plot.red_s = red.t_s, plot.red_percent = over_mean(red.level);
    plot.infrared_s = infrared.t_s, plot.infrared_percent = over_mean(infrared.level);
    if (plot.red_percent.empty() || plot.infrared_percent.empty()) return not_drawn("there is no light to speak of");
    story_.pulses.push_back(std::move(plot));
  }

  static std::vector<double> over_mean(std::vector<double> level) {
    double sum = 0.0;
    for (const double value : level) sum += value;
    if (level.empty() || !(std::abs(sum) > 0.0)) return {};
    const double mean = sum / static_cast<double>(level.size());
    for (double& value : level) value = 100.0 * (value / mean - 1.0);
    return level;
  }

  void not_drawn(const std::string& why) { story_.not_drawn.push_back(kind_ + ": " + why); }

  RunStory& story_;
  std::optional<measure::PhantomCertificate> certificate_;
  std::string kind_;
};

bool is_drawn(std::string_view kind) {
  return kind == "red_spectrum" || kind == "infrared_spectrum" || kind.starts_with("pulses_");
}

void draw_captures(db::Reader& reader, RunStory& story) {
  Drawing drawing{story, certificate_of(reader, story.run)};
  for (const db::CaptureRecord& kept : story.run.captures) {
    if (!is_drawn(kept.kind)) continue;
    const auto bytes = db::capture_bytes(reader, kept.number);
    if (!bytes) {
      story.not_drawn.push_back(kept.kind + ": " + bytes.error().what());
      continue;
    }
    const auto capture = measure::decode(*bytes, kept.kind);
    if (capture)
      drawing.take(*capture, kept.kind);
    else
      story.not_drawn.push_back(kept.kind + ": " + capture.error().what());
  }
  std::stable_sort(story.pulses.begin(), story.pulses.end(),
                   [](const PulsePlot& a, const PulsePlot& b) { return a.set_point_ratio < b.set_point_ratio; });
}

}  // namespace

std::optional<db::RunId> run_of_entry(db::Reader& reader, std::int64_t number) {
  const auto found = db::entries(reader, number, number);
  if (found.empty()) return std::nullopt;
  if (found[0].kind == "run_opened") return db::RunId{number};
  if (found[0].kind == "run_closed" || found[0].kind == "label_made") return db::RunId{found[0].data.number("run")};
  return std::nullopt;
}

Result<RunStory> run_story(db::Reader& reader, std::int64_t entry) {
  const db::Snapshot one_state{reader.connection()};
  const std::string where = "entry " + std::to_string(entry);
  if (!db::seal_at(reader, entry)) return Problem{"entry_unknown", where};
  const auto id = run_of_entry(reader, entry);
  if (!id) return Problem{"entry_of_no_run", where};
  auto run = db::run_record(reader, *id);
  if (!run) return Problem{"entry_of_no_run", where};
  RunStory story;
  story.run = *std::move(run);
  story.seal = db::newest_seal(reader);
  for (const db::LabelRecord& label : db::labels_of_serial(reader, story.run.opened.serial))
    if (label.run == story.run.run) story.labels.push_back(label);
  draw_captures(reader, story);
  return story;
}

}  // namespace probewright::trace
