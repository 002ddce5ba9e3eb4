#include "station/text/checkup.h"

#include <sys/timex.h>
#include <unistd.h>

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <filesystem>

#include "db/lease.h"
#include "db/queries/seal.h"
#include "db/reader.h"
#include "drivers/wire/asio_clock.h"
#include "drivers/wire/serial_source.h"
#include "station/base/numbers.h"
#include "station/base/zone.h"
#include "station/sequence/device_settings.h"
#include "station/text/station_choice.h"

namespace probewright::text {
namespace {

namespace fs = std::filesystem;
using namespace sequence;

/// Below this much room the ledger's disk is full soon: a year of captures is some tens of gigabytes.
constexpr double least_room_GB = 1.0;
/// A certificate that ends within this many days is told ahead.
constexpr int warn_days = 30;

/// One thing that was looked at. `problem` empty: well.
struct Finding {
  std::string subject, words;
  std::optional<Problem> problem;
  bool stops = true;  ///< false: to be known, but the station can work
};

class Checkup {
 public:
  Checkup(const CheckupOptions& options, const Configuration& configuration)
      : options_(options),
        configuration_(configuration),
        station_(configuration.station.value),
        clock_(io_.get_executor(), station_.speed) {}

  std::vector<Finding> look() {
    look_at_documents();
    look_at_clock();
    look_at_ledger();
    for (const NestPlace& nest : station_.nests) look_at_nest(nest);
    return std::move(findings_);
  }

 private:
  void well(std::string subject, std::string words) { findings_.push_back({std::move(subject), std::move(words), {}}); }
  void wrong(std::string subject, Problem problem, bool stops = true) {
    std::string words = problem.what();
    findings_.push_back({std::move(subject), std::move(words), std::move(problem), stops});
  }

  void look_at_documents() {
    well("documents",
         std::to_string(configuration_.models.size()) + " models, " + std::to_string(configuration_.sheets.size()) +
             " sheets, " +
             std::to_string(configuration_.phantom_certificates.size() + configuration_.adapter_certificates.size()) +
             " certificates in " + configuration_.folder.string());
    for (const auto& [name, sheet] : configuration_.sheets)
      for (const Problem& warning : sheet.value.warnings) wrong("sheet " + name, warning, false);
  }

  void look_at_clock() {
    const auto zone = Zone::read(station_.zone);
    if (!zone) return wrong("clock", zone.error());
    zone_ = *zone;
    timex state{};
    if (::adjtimex(&state) == TIME_ERROR || (state.status & STA_UNSYNC))
      wrong("clock", {"clock_unsynchronised", station_.zone}, false);
    else
      well("clock", zone_.local_text(clock_.utc_now()) + " in " + station_.zone + ", synchronised");
  }

  void look_at_ledger() {
    const fs::path path = options_.ledger.empty() ? ledger_path(station_) : options_.ledger;
    const std::string where = path.string();
    std::error_code error;
    fs::path folder = fs::absolute(path, error).parent_path();
    while (!fs::exists(folder, error) && folder.has_relative_path()) folder = folder.parent_path();
    if (::access(folder.c_str(), W_OK) != 0)
      wrong("ledger", {"ledger_folder", folder.string(), {{"reason", "no right to write"}}});
    if (const auto network = db::network_file_system_of(folder.string()); !network.empty())
      wrong("ledger", {"ledger_network", where, {{"type", network}}});
    const double room_GB = static_cast<double>(fs::space(folder, error).available) * 1e-9;
    if (!error && room_GB < least_room_GB)
      wrong("disk", {"disk_nearly_full", folder.string(), {{"room", fixed(room_GB, 1)}}});
    else
      well("disk", fixed(room_GB, 1) + " GB free in " + folder.string());
    if (!fs::exists(path, error)) return well("ledger", where + " will be begun by the first run");
    look_into_ledger(where);
  }

  void look_into_ledger(const std::string& path) {
    auto reader = db::Reader::open(path);
    if (!reader) return wrong("ledger", reader.error());
    const auto newest = db::newest_entry_time(*reader);
    const auto behind_us = newest ? newest->microseconds - clock_.utc_now().microseconds : 0;
    if (behind_us > 2'000'000)
      return wrong("ledger", {"ledger_clock_behind", path, {{"seconds", std::to_string(behind_us / 1'000'000)}}});
    well("ledger", path + ", " + std::to_string(db::newest_seal(*reader).entry) + " entries");
  }

  void look_at_nest(const NestPlace& place) {
    const auto& phantom = configuration_.phantom_certificates.find(place.phantom.certificate)->second.value;
    const auto& adapter = configuration_.adapter_certificates.find(place.adapter.certificate)->second.value;
    phantom::Driver phantom_driver{phantom_settings(phantom, station_, place.nest), source(place.phantom), clock_,
                                   entropy_};
    adapter::Driver adapter_driver{adapter_settings(adapter, station_, place.nest), source(place.adapter), clock_,
                                   entropy_};
    look_at_device("phantom of " + nest_name(place.nest), phantom_driver, phantom.head, place.phantom);
    look_at_device("adapter of " + nest_name(place.nest), adapter_driver, adapter.head, place.adapter);
  }

  wire::PortSource source(const DevicePlace& place) {
    return wire::serial_source(io_.get_executor(), clock_, port_path(station_, place, options_.ports), station_.baud);
  }

  template <class Driver>
  void look_at_device(const std::string& name, Driver& driver, const measure::CertificateHead& head,
                      const DevicePlace& place) {
    std::exception_ptr failed;
    boost::asio::co_spawn(io_, driver.connect(), [&failed](const std::exception_ptr& error) { failed = error; });
    io_.restart();
    io_.run();
    if (failed) {
      try {
        std::rethrow_exception(failed);
      } catch (const ProblemError& known) {
        return wrong(name, known.problem());
      }
    }
    const wire::Identity& found = driver.identity();
    std::string words = found.maker + " " + found.model + " " + found.serial + ", firmware " + found.firmware;
    if (found.emulated) words += ", emulated at speed " + shortest(found.speed);
    well(name, words + ", at " + port_path(station_, place, options_.ports));
    look_at_certificate(head);
  }

  void look_at_certificate(const measure::CertificateHead& head) {
    const UtcTime now = clock_.utc_now();
    const UtcTime later{now.microseconds + warn_days * 86'400'000'000LL};
    const std::string subject = "certificate " + head.number;
    if (zone_.day(now) > head.due)
      wrong(subject, {"certificate_ended", head.device_serial, {{"number", head.number}, {"due", head.due}}});
    else if (zone_.day(later) > head.due)
      wrong(subject, {"certificate_ends_soon", head.device_serial, {{"number", head.number}, {"due", head.due}}},
            false);
    else
      well(subject, "holds up to " + head.due);
  }

  const CheckupOptions& options_;
  const Configuration& configuration_;
  const StationFile& station_;
  boost::asio::io_context io_{1};
  wire::AsioClock clock_;
  SystemEntropy entropy_;
  Zone zone_;
  std::vector<Finding> findings_;
};

std::string_view word_of(const Finding& finding) {
  if (!finding.problem) return "well";
  return finding.stops ? "wrong" : "note";
}

void print(const std::vector<Finding>& findings, Console& console) {
  for (const Finding& finding : findings) {
    std::string line{word_of(finding)};
    line.resize(7, ' ');
    console.print(line + finding.subject + ": " + finding.words);
    if (finding.problem) console.print("       -> " + finding.problem->remedy());
  }
}

Json json_findings(const std::vector<Finding>& findings) {
  Json rows = Json::array();
  bool well = true;
  for (const Finding& finding : findings) {
    Json row = Json::object();
    row.set("subject", finding.subject).set("state", word_of(finding)).set("words", finding.words);
    row.set("remedy", finding.problem ? Json{finding.problem->remedy()} : Json{});
    rows.add(std::move(row));
    well &= !(finding.problem && finding.stops);
  }
  Json json = Json::object();
  json.set("format", 1).set("well", well).set("findings", std::move(rows));
  return json;
}

}  // namespace

int checkup(const CheckupOptions& options, Console& console) {
  auto configuration = chosen_configuration(options.choice, options.speed);
  if (!configuration) return console.refuse(configuration.error());
  const std::vector<Finding> findings = Checkup{options, *configuration}.look();
  if (console.json())
    console.print_json(json_findings(findings));
  else
    print(findings, console);
  for (const Finding& finding : findings)
    if (finding.problem && finding.stops) return answer_is_no;
  return done;
}

}  // namespace probewright::text
