#include "station/main_options.h"

#include <CLI/CLI.hpp>
#include <cstring>

#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/sequence/station_file.h"
#include "station/text/overview.h"

// The only file that knows the library which takes command lines apart.
namespace probewright {
namespace {

/// Carries a problem of one option's value out of the parser.
struct Refused : CLI::ParseError {
  explicit Refused(Problem problem_)
      : CLI::ParseError("Refused", problem_.text(), CLI::ExitCodes::ValidationError), problem(std::move(problem_)) {}
  Problem problem;
};

/// "probewright ledger verify"
std::string full_name(const CLI::App& app) {
  const CLI::App* parent = app.get_parent();
  return parent ? full_name(*parent) + " " + app.get_name() : app.get_name();
}

Problem value_problem(std::string_view id, const CLI::App& app, const std::string& option, const std::string& text,
                      const std::string& wanted) {
  return {id, full_name(app), {{"option", option}, {"text", text}, {"wanted", wanted}, {"command", full_name(app)}}};
}

/// An option that takes a number; from_chars reads it, so no locale and no "nan" or "0x10".
template <class Number>
CLI::Option* add_number(CLI::App& app, const std::string& name, Number& into, const std::string& help) {
  return app
      .add_option_function<std::string>(
          name,
          [&app, &into, name](const std::string& text) {
            const auto number = parse_double(text);
            if (!number) throw Refused(value_problem("usage_not_a_number", app, name, text, ""));
            into = *number;
          },
          help)
      ->type_name("NUMBER");
}

template <class Integer>
CLI::Option* add_whole(CLI::App& app, const std::string& name, Integer& into, const std::string& help) {
  return app
      .add_option_function<std::string>(
          name,
          [&app, &into, name](const std::string& text) {
            const auto number = parse_integer(text);
            if (!number || *number < 1 || *number > 1'000'000'000)
              throw Refused(value_problem("usage_not_whole", app, name, text, ""));
            into = static_cast<Integer>(*number);
          },
          help)
      ->type_name("N");
}

/// An option whose value is one of a few words.
CLI::Option* add_word(CLI::App& app, const std::string& name, const std::vector<std::string>& words,
                      const std::function<void(const std::string&)>& take, const std::string& help) {
  std::string listed;
  for (const std::string& word : words) listed += (listed.empty() ? "" : ", ") + word;
  return app
      .add_option_function<std::string>(
          name,
          [&app, name, words, take, listed](const std::string& text) {
            if (std::find(words.begin(), words.end(), text) == words.end())
              throw Refused(value_problem("usage_word", app, name, text, listed));
            take(text);
          },
          help + " (" + listed + ")")
      ->type_name("WORD");
}

/// A flag that decides something one way; its opposite is another flag.
CLI::Option* add_choice(CLI::App& app, const std::string& name, std::optional<bool>& into, bool value,
                        const std::string& help) {
  return app.add_flag_function(
      name, [&into, value](std::int64_t) { into = value; }, help);
}

/// Builds the commands and keeps what was read. One object reads one command line.
class Reader {
 public:
  Reader(const text::Build& build, const std::filesystem::path& installed);
  Result<CommandLine> read(int argc, const char* const* argv);

 private:
  CLI::App& command(CLI::App& parent, const std::string& name, const std::string& what, const std::string& example);
  CLI::App& group(const std::string& name, const std::string& what);
  void add_json(CLI::App& app) { app.add_flag("--json", line_.json, "print the answer as JSON"); }
  template <class Options>
  void answers(CLI::App& app, Options& options);

  void add_demo();
  void add_bench();
  void add_line();
  void add_test();
  void add_checkup();
  void add_trace();
  void add_report();
  void add_label();
  void add_simulate();
  void add_page(CLI::App& app, text::ReportOptions& options);
  void add_rederive();
  void add_impact();
  void add_ledger();
  void add_ledger_copies(CLI::App& ledger);
  void add_ledger_years(CLI::App& ledger);
  void add_ledger_export(CLI::App& ledger);
  void add_limits();
  void add_measure();
  void add_recording();
  void add_part(CLI::App& app, text::RecordingPart& part);

  const CLI::App& innermost() const;
  Problem unexpected(const std::string& text) const;
  Problem missing(const std::string& what) const;

  CLI::App app_{"Tests pulse-oximetry probes on a production station and keeps the evidence.", "probewright"};
  text::Build build_;
  std::string program_ = "probewright";  ///< as it was started
  text::StationChoice choice_;
  bool version_ = false;
  CommandLine line_;

  text::DemoOptions demo_;
  emulated::RunBenchOptions bench_;
  text::LineOptions run_line_;
  text::TestOptions test_;
  text::CheckupOptions checkup_;
  text::TraceOptions trace_;
  text::ReportRunOptions report_run_;
  text::ReportSerialOptions report_serial_;
  text::ReportShiftOptions report_shift_;
  text::LabelOptions label_;
  text::LedgerVerifyOptions verify_;
  text::LedgerSealOptions seal_;
  text::LedgerBackupOptions backup_;
  text::LedgerRestoreOptions restore_;
  text::LedgerCloseVolumeOptions close_volume_;
  text::LedgerPruneOptions prune_;
  text::LedgerExportOptions export_;
  text::RederiveOptions rederive_;
  text::ImpactOptions impact_;
  text::LimitsCheckOptions check_;
  text::LimitsDiffOptions diff_;
  text::SimulateOptions simulate_;
  text::MeasureSpectrumOptions spectrum_;
  text::MeasurePulsesOptions pulses_;
  text::ReplayOptions replay_;
  text::RecordingShowOptions show_;
  text::RecordingCutOptions cut_;
};

Reader::Reader(const text::Build& build, const std::filesystem::path& installed) : build_(build) {
  choice_.installed = installed;
  app_.fallthrough();
  app_.require_subcommand(0, 1);
  app_.get_formatter()->column_width(32);
  app_.get_formatter()->label("REQUIRED", "(needed)");
  app_.get_formatter()->label("Needs", "with");
  app_.get_formatter()->label("Excludes", "not with");
  app_.get_formatter()->label("SUBCOMMAND", "COMMAND");
  app_.get_formatter()->label("OPTIONS", "OPTION...");
  app_.set_help_flag("--help,-h", "say how this is used");
  app_.add_flag("--version", version_, "print version, commit and compiler");
  app_.add_option("--config", choice_.config, "folder of the configuration")->type_name("DIR");
  app_.add_option("--station", choice_.station, "which station of the configuration")->type_name("NAME");
  app_.footer("Ask a command for its options and an example: probewright test --help");
  add_demo();
  add_bench();
  add_line();
  add_test();
  add_checkup();
  add_trace();
  add_report();
  add_label();
  add_rederive();
  add_impact();
  add_simulate();
  add_ledger();
  add_limits();
  add_measure();
  add_recording();
}

CLI::App& Reader::command(CLI::App& parent, const std::string& name, const std::string& what,
                          const std::string& example) {
  CLI::App& app = *parent.add_subcommand(name, what)->group("Commands");
  app.footer("Example:\n  " + example);
  return app;
}

CLI::App& Reader::group(const std::string& name, const std::string& what) {
  CLI::App& app = *app_.add_subcommand(name, what)->group("Commands");
  app.require_subcommand(1);
  app.footer("Ask for more: probewright " + name + " COMMAND --help");
  return app;
}

/// What to hand on when this command was the one.
template <class Options>
void Reader::answers(CLI::App& app, Options& options) {
  app.final_callback([this, &options] {
    if constexpr (requires { options.choice; }) options.choice = choice_;
    if constexpr (requires { options.build; }) options.build = build_;
    if constexpr (requires { options.program; }) options.program = program_;
    line_.request = options;
  });
}

void Reader::add_demo() {
  CLI::App& app = command(app_, "demo", "test a lot of probes with planted faults on an emulated bench, hands included",
                          "probewright demo --headless --probes 48 --nests 4 --speed 10");
  app.add_flag("--headless", demo_.headless, "in text, even where a window could be opened");
  add_whole(app, "--probes", demo_.probes, "how many probes the lot has, 48 unless told");
  add_whole(app, "--nests", demo_.nests, "how many nests, 1 to 16; 4 unless told");
  add_number(app, "--speed", demo_.speed, "how fast the bench's time goes, 1 unless told");
  add_whole(app, "--seed", demo_.seed, "what probes, faults, noise and mistakes are drawn from, 1 unless told");
  add_number(app, "--mistakes", demo_.mistakes,
             "share of the probes with which the operator makes a mistake, 0 to 1; 0 unless told");
  app.add_option("--out", demo_.out, "folder for ledger, labels, report and all else; a new one unless told")
      ->type_name("DIR");
  add_json(app);
  answers(app, demo_);
}

void Reader::add_bench() {
  CLI::App& app = command(app_, "bench", "emulate the devices of a station on pseudo-terminals until it is interrupted",
                          "probewright bench --nests 2 --truth truth.json");
  add_whole(app, "--nests", bench_.bench.nests, "how many nests, 1 unless told");
  add_number(app, "--speed", bench_.bench.speed,
             "how fast its time goes, 1 unless told; the station's must be the same");
  add_whole(app, "--seed", bench_.bench.seed, "what its probes, errors and noise are drawn from, 1 unless told");
  app.add_flag("--perfect", bench_.bench.perfect, "its certificates are exactly true");
  add_number(app, "--ambient-C", bench_.bench.ambient_degC, "temperature of the room, 25 unless told");
  add_number(app, "--mains-Hz", bench_.bench.mains_Hz, "mains frequency, 50 unless told");
  app.add_option("--ports", bench_.folder, "folder for the ports nest1-phantom, nest1-adapter ...")->type_name("DIR");
  app.add_option("--attach", bench_.attach, "use terminals that stand in this folder instead of making some")
      ->type_name("DIR");
  app.add_option("--control", bench_.control, "socket that takes the place of hands at the bench")->type_name("SOCKET");
  app.add_option("--scenario", bench_.scenario_file, "what goes wrong with the bench, where and when")
      ->type_name("FILE");
  app.add_option("--truth", bench_.truth_file, "write what the probes really are to this file")->type_name("FILE");
  app.add_option("--seat", bench_.seats, "a probe that sits there from the start; may stand several times")
      ->type_name("NEST:SERIAL")
      ->expected(1)
      ->take_all();
  app.final_callback([this] {
    if (bench_.folder.empty()) bench_.folder = sequence::runtime_port_folder();
    line_.request = bench_;
  });
}

void Reader::add_line() {
  CLI::App& app =
      command(app_, "line", "run the station: scan badges, lot cards and probes, test in all nests",
              "probewright bench                    (in another terminal)\n  probewright line --text --hands");
  app.add_flag("--text", run_line_.text, "in the terminal, even where a window could be opened");
  app.add_option("--ledger", run_line_.ledger, "ledger instead of the station's")->type_name("FILE");
  app.add_option("--ports", run_line_.ports, "folder of the serial ports instead of the station's")->type_name("DIR");
  add_number(app, "--speed", run_line_.speed, "speed of the emulated bench instead of the station's");
  app.add_flag("--hands", run_line_.hands, "let the emulated bench put in what was scanned, and take it out");
  app.add_option("--control", run_line_.control, "control socket of the emulated bench")->type_name("SOCKET");
  answers(app, run_line_);
}

void Reader::add_test() {
  CLI::App& app =
      command(app_, "test", "test one probe in one nest",
              "probewright bench                    (in another terminal)\n  probewright test AQ20-048-00001");
  app.add_option("SERIAL", test_.serial, "serial number of the probe")->required()->type_name("");
  add_whole(app, "--nest", test_.nest, "nest that the probe goes into, 1 unless told");
  add_word(
      app, "--purpose", {"production", "engineering", "reference", "challenge", "gauge", "echo", "training", "return"},
      [this](const std::string& word) { test_.purpose = word; }, "why the run is made, engineering unless told");
  app.add_option("--operator", test_.operator_name, "who tests; kept with the run")->type_name("NAME");
  app.add_option("--ledger", test_.ledger, "ledger instead of the station's")->type_name("FILE");
  app.add_option("--ports", test_.ports, "folder of the serial ports instead of the station's")->type_name("DIR");
  add_number(app, "--speed", test_.speed, "speed of the emulated bench instead of the station's");
  CLI::Option* hands = add_choice(app, "--hands", test_.hands, true,
                                  "let the emulated bench seat the probe; so unless told, where one runs");
  add_choice(app, "--no-hands", test_.hands, false, "wait for a person to seat it")->excludes(hands);
  app.add_option("--control", test_.control, "control socket of the emulated bench")->type_name("SOCKET");
  app.add_option("--record", test_.record, "keep every byte both ways in this new folder, to show or replay it")
      ->type_name("DIR");
  add_json(app);
  answers(app, test_);
}

void Reader::add_part(CLI::App& app, text::RecordingPart& part) {
  add_number(app, "--from", part.from_s, "seconds since the recording began, its beginning unless told");
  add_number(app, "--to", part.to_s, "seconds since the recording began, its end unless told");
}

void Reader::add_recording() {
  CLI::App& again = command(app_, "replay", "make a recorded run again from its bytes and compare",
                            "probewright test AQ20-048-00001 --record run-1\n  probewright replay run-1");
  again.add_option("DIR", replay_.folder, "folder of the recording")->required()->type_name("");
  add_json(again);
  answers(again, replay_);
  CLI::App& recording = group("recording", "look into recordings of what went over the lines");
  CLI::App& show = command(recording, "show", "print its messages", "probewright recording show run-1 --from 2 --to 3");
  show.add_option("DIR", show_.folder, "folder of the recording")->required()->type_name("");
  show.add_option("--device", show_.device, "one line only, as nest1-phantom")->type_name("NAME");
  add_part(show, show_.part);
  answers(show, show_);
  CLI::App& part = command(recording, "cut", "make a recording of a part of it",
                           "probewright recording cut run-1 for-the-report --from 2 --to 3");
  part.add_option("DIR", cut_.folder, "folder of the recording")->required()->type_name("");
  part.add_option("INTO", cut_.into, "new folder for the part")->required()->type_name("");
  add_part(part, cut_.part);
  answers(part, cut_);
}

void Reader::add_checkup() {
  CLI::App& app = command(app_, "checkup", "say what is wrong with the station and how to mend it",
                          "probewright checkup --station Quay-1");
  app.add_option("--ledger", checkup_.ledger, "ledger instead of the station's")->type_name("FILE");
  app.add_option("--ports", checkup_.ports, "folder of the serial ports instead of the station's")->type_name("DIR");
  add_number(app, "--speed", checkup_.speed, "speed of the emulated bench instead of the station's");
  add_json(app);
  answers(app, checkup_);
}

void Reader::add_trace() {
  CLI::App& app =
      command(app_, "trace", "print all that is known of one serial, or what belongs to a lot, a person, a day",
              "probewright trace AQ20-048-00001\n  probewright trace --lot AQ20-W48-07");
  app.add_option("SERIAL", trace_.serial, "serial number of the probe")->type_name("");
  app.add_option("--lot", trace_.lot, "runs and entries of this lot")->type_name("LOT");
  app.add_option("--person", trace_.person, "what this person tested, signed and did")->type_name("NAME");
  add_whole(app, "--entry", trace_.entry, "one entry, and the run that it is of");
  app.add_option("--day", trace_.day, "runs and entries of a day in the plant's zone")->type_name("DAY");
  app.add_option("--ledger", trace_.ledger, "ledger instead of the station's")->type_name("FILE");
  add_json(app);
  app.final_callback([this, &app] {
    const std::vector<std::pair<const char*, bool>> asked{{"SERIAL", !trace_.serial.empty()},
                                                          {"--lot", !trace_.lot.empty()},
                                                          {"--person", !trace_.person.empty()},
                                                          {"--entry", trace_.entry.has_value()},
                                                          {"--day", !trace_.day.empty()}};
    std::vector<std::string> given;
    for (const auto& [name, is_given] : asked)
      if (is_given) given.emplace_back(name);
    if (given.empty())
      throw Refused(Problem{"usage_missing", full_name(app), {{"what", "SERIAL"}, {"command", full_name(app)}}});
    if (given.size() > 1)
      throw Refused(Problem{"usage_not_together", full_name(app), {{"first", given[0]}, {"second", given[1]}}});
    trace_.choice = choice_;
    line_.request = trace_;
  });
}

/// Options that every report has.
void Reader::add_page(CLI::App& app, text::ReportOptions& options) {
  app.add_option("--out", options.out, "PDF to write; with --json only then")->type_name("FILE");
  app.add_option("--ledger", options.ledger, "ledger instead of the station's")->type_name("FILE");
  add_json(app);
}

void Reader::add_report() {
  CLI::App& report = group("report", "draw a run, a serial's life or a shift as PDF");
  CLI::App& run = command(report, "run", "one run: readings, limits, plots of its captures, devices, documents",
                          "probewright report run 123 --out run.pdf");
  add_whole(run, "ENTRY", report_run_.entry, "number of the run, or of any entry of it")->required()->type_name("");
  add_page(run, report_run_);
  answers(run, report_run_);
  CLI::App& serial = command(report, "serial", "the life of one serial: its runs, verdicts, labels",
                             "probewright report serial AQ20-048-00001");
  serial.add_option("SERIAL", report_serial_.serial, "serial number of the probe")->required()->type_name("");
  add_page(serial, report_serial_);
  answers(serial, report_serial_);
  CLI::App& shift = command(report, "shift", "what a shift or a lot did: yield, failing checks, nests, charts",
                            "probewright report shift --from \"2026-12-01 06:00\" --to \"2026-12-01 14:00\"");
  shift
      .add_option("--from", report_shift_.from, "begin of the shift, such as \"2026-12-01 06:00\" in the plant's zone")
      ->type_name("TIME");
  shift.add_option("--to", report_shift_.to, "its end; the newest entry unless told")->type_name("TIME");
  shift.add_option("--day", report_shift_.day, "a whole day of the plant's zone; that of the newest entry unless told")
      ->type_name("DAY");
  shift.add_option("--lot", report_shift_.lot, "runs of this lot only; of all days unless told")->type_name("LOT");
  add_page(shift, report_shift_);
  answers(shift, report_shift_);
}

void Reader::add_label() {
  CLI::App& app = command(app_, "label", "make the label of a serial's last production run as PDF and PNG",
                          "probewright label AQ20-048-00001 --out labels");
  app.add_option("SERIAL", label_.serial, "serial number of the probe")->required()->type_name("");
  app.add_option("--out", label_.folder, "folder for the files; the current one unless told")->type_name("DIR");
  add_word(
      app, "--kind", {"pass", "fail"}, [this](const std::string& word) { label_.kind = word; },
      "refuse where the verdict is another");
  app.add_option("--reason", label_.reason, "why it is printed again; needed for a reprint")->type_name("TEXT");
  app.add_option("--operator", label_.who, "who asks for it; kept with the entry")->type_name("NAME");
  add_number(app, "--width-mm", label_.form.width_mm, "width of the label, 40 unless told");
  add_number(app, "--height-mm", label_.form.height_mm, "height of the label, 20 unless told");
  add_whole(app, "--dpi", label_.form.dots_per_inch, "dots per inch of the picture, 300 unless told");
  app.add_option("--ledger", label_.ledger, "ledger instead of the station's")->type_name("FILE");
  add_json(app);
  answers(app, label_);
}

void Reader::add_rederive() {
  CLI::App& app = command(app_, "rederive", "compute readings and verdicts anew from stored captures, and compare",
                          "probewright rederive AQ20-048-00001");
  app.add_option("SERIAL", rederive_.serial, "all runs of this serial")->type_name("");
  app.add_option("--lot", rederive_.lot, "all runs of this lot")->type_name("LOT");
  add_whole(app, "--run", rederive_.run, "one run, by the number of its opening entry");
  app.add_flag("--all", rederive_.everything, "every run of the ledger");
  app.add_option("--ledger", rederive_.ledger, "ledger instead of the station's")->type_name("FILE");
  add_whole(app, "--threads", rederive_.threads, "threads, as many as the machine has unless told");
  add_json(app);
  answers(app, rederive_);
}

void Reader::add_impact() {
  CLI::App& app = command(app_, "impact", "tell which passed probes would have failed had a device been right",
                          "probewright impact PH-07 --since 2026-03-03 --off wavelength --by 0.4");
  app.add_option("DEVICE", impact_.device, "serial of the device, or number of its certificate")
      ->required()
      ->type_name("");
  app.add_option("--since", impact_.since, "from this day or moment on")->required()->type_name("TIME");
  app.add_option("--until", impact_.until, "up to this day or moment")->type_name("TIME");
  CLI::Option* off = add_word(
      app, "--off",
      {"wavelength", "temperature", "slit", "ratio", "modulation", "drive", "photocurrent", "voltage", "resistance"},
      [this](const std::string& word) { impact_.off = word; }, "what was off");
  CLI::Option* by = add_number(app, "--by", impact_.by,
                               "how much too high it told: nm for wavelength and slit, K for temperature, else %");
  off->needs(by);
  by->needs(off);
  app.add_flag("--both-ways", impact_.both_ways, "the direction is not known: the worse of both counts")->needs(off);
  app.add_option("--certificate", impact_.certificate, "the corrected certificate, instead of --off and --by")
      ->type_name("FILE");
  app.add_option("--ledger", impact_.ledger, "ledger instead of the station's")->type_name("FILE");
  add_whole(app, "--threads", impact_.threads, "threads, as many as the machine has unless told");
  CLI::Option* hold = app.add_flag("--hold", impact_.hold, "put the serials that would have failed on hold");
  hold->needs(app.add_option("--who", impact_.who, "who puts them on hold")->type_name("NAME"));
  hold->needs(app.add_option("--reason", impact_.reason, "why; kept in the ledger")->type_name("TEXT"));
  add_json(app);
  answers(app, impact_);
}

void Reader::add_ledger() {
  CLI::App& ledger = group("ledger", "check, back up, restore and close ledgers; print the seal");
  CLI::App& verify = command(ledger, "verify", "walk a whole ledger and name the first place that does not agree",
                             "probewright ledger verify ledger.db");
  verify.add_option("FILE", verify_.file, "the ledger")->required()->type_name("");
  CLI::Option* seal = verify.add_option("--seal", verify_.seal, "a seal from an earlier report, 64 digits");
  seal->type_name("HASH");
  CLI::Option* entry = add_whole(verify, "--entry", verify_.entry, "the entry that the seal was printed for");
  seal->needs(entry);
  entry->needs(seal);
  add_whole(verify, "--from", verify_.from, "first entry to look at; the hash before it is taken as it stands");
  add_json(verify);
  answers(verify, verify_);
  CLI::App& newest =
      command(ledger, "seal", "print number and hash of the newest entry", "probewright ledger seal ledger.db");
  newest.add_option("FILE", seal_.file, "the ledger; the station's unless told")->type_name("");
  add_json(newest);
  answers(newest, seal_);
  add_ledger_copies(ledger);
  add_ledger_years(ledger);
  add_ledger_export(ledger);
}

void Reader::add_ledger_copies(CLI::App& ledger) {
  CLI::App& backup = command(ledger, "backup", "copy a ledger as it stands at one moment, and check the copy",
                             "probewright ledger backup /mnt/backups");
  backup.add_option("TO", backup_.to, "file to make, or a folder for it")->required()->type_name("");
  backup.add_option("--ledger", backup_.ledger, "ledger instead of the station's")->type_name("FILE");
  backup.add_option("--who", backup_.who, "who makes it; station unless told")->type_name("NAME");
  add_json(backup);
  answers(backup, backup_);
  CLI::App& restore =
      command(ledger, "restore", "make a ledger again from a backup, or try whether it could be",
              "probewright ledger restore backup.db ledger.db --who 'Piet Hallgrim' --reason 'disk died'");
  restore.add_option("BACKUP", restore_.backup, "the backup")->required()->type_name("");
  restore.add_option("TO", restore_.to, "file to make; never written over")->type_name("");
  restore.add_flag("--drill", restore_.drill, "only try it, and record the trial in the ledger");
  restore.add_option("--ledger", restore_.ledger, "ledger that records the trial instead of the station's")
      ->type_name("FILE");
  CLI::Option* seal = restore.add_option("--seal", restore_.seal, "a seal from an earlier report, 64 digits");
  seal->type_name("HASH");
  CLI::Option* entry = add_whole(restore, "--entry", restore_.entry, "the entry that the seal was printed for");
  seal->needs(entry);
  entry->needs(seal);
  restore.add_option("--who", restore_.who, "who restores; station unless told")->type_name("NAME");
  restore.add_option("--reason", restore_.reason, "why; kept in the ledger")->type_name("TEXT");
  add_json(restore);
  answers(restore, restore_);
}

void Reader::add_ledger_years(CLI::App& ledger) {
  CLI::App& close = command(ledger, "close-volume", "close the ledger's file as a volume and begin the next one",
                            "probewright ledger close-volume --who 'Piet Hallgrim' --reason 'end of the year'");
  close.add_option("--ledger", close_volume_.ledger, "ledger instead of the station's")->type_name("FILE");
  close.add_option("--who", close_volume_.who, "who closes it")->required()->type_name("NAME");
  close.add_option("--reason", close_volume_.reason, "why; kept in the ledger")->required()->type_name("TEXT");
  add_json(close);
  answers(close, close_volume_);
  CLI::App& prune =
      command(ledger, "prune", "tell which captured bytes may go after the record period, or take them away",
              "probewright ledger prune --record-days 730 --keep-one-in 20");
  prune.add_option("--ledger", prune_.ledger, "ledger instead of the station's")->type_name("FILE");
  add_whole(prune, "--record-days", prune_.record_days, "how long captures are kept in any case")->required();
  add_whole(prune, "--keep-one-in", prune_.keep_one_in, "keep those of 1 serial in so many for good");
  CLI::Option* away = prune.add_flag("--take-away", prune_.take_away, "do it; otherwise it is only told");
  CLI::Option* who = prune.add_option("--who", prune_.who, "who takes them away")->type_name("NAME");
  CLI::Option* reason = prune.add_option("--reason", prune_.reason, "why; kept in the ledger")->type_name("TEXT");
  away->needs(who);
  away->needs(reason);
  add_json(prune);
  answers(prune, prune_);
}

void Reader::add_ledger_export(CLI::App& ledger) {
  CLI::App& app =
      command(ledger, "export", "write runs and readings for use elsewhere, as tables or as a signed bundle",
              "probewright ledger export lot-07.tar --lot AQ20-W48-07 --key station.pem");
  app.add_option("TO", export_.to, "file or folder to make; a bundle named .tar is one file")
      ->required()
      ->type_name("");
  add_word(
      app, "--as", {"runs", "readings", "json", "bundle"}, [this](const std::string& word) { export_.as = word; },
      "runs or readings as CSV, both as JSON, or all of it as a bundle; a bundle unless told");
  CLI::Option* serial = app.add_option("--serial", export_.serial, "runs of this serial")->type_name("SERIAL");
  app.add_option("--lot", export_.lot, "runs of this lot")->type_name("LOT")->excludes(serial);
  app.add_option("--key", export_.key, "private Ed25519 key (PEM) that signs the bundle")->type_name("FILE");
  app.add_flag("--with-captures", export_.with_captures, "put the raw data into the bundle too");
  app.add_option("--ledger", export_.ledger, "ledger instead of the station's")->type_name("FILE");
  app.add_option("--who", export_.who, "who exports; station unless told")->type_name("NAME");
  add_json(app);
  answers(app, export_);
}

void Reader::add_limits() {
  CLI::App& limits = group("limits", "check and compare limit sheets");
  CLI::App& check = command(limits, "check", "tell every fault of a limit sheet, or what it says",
                            "probewright limits check configs/sheets/aq-20.yaml");
  check.add_option("FILE", check_.file, "the limit sheet")->required()->type_name("");
  check.add_option("--model", check_.model, "hold it against this model too")->type_name("FILE");
  add_json(check);
  answers(check, check_);
  CLI::App& diff = command(limits, "diff", "tell what changed between two sheets, and which way it moves",
                           "probewright limits diff aq-20-3.yaml aq-20-4.yaml");
  diff.add_option("BEFORE", diff_.before, "the earlier sheet")->required()->type_name("");
  diff.add_option("AFTER", diff_.after, "the later sheet")->required()->type_name("");
  add_json(diff);
  answers(diff, diff_);
}

void Reader::add_simulate() {
  CLI::App& app = command(app_, "simulate", "estimate yield, false accepts and false rejects of a sheet by simulation",
                          "probewright simulate --sheet configs/sheets/aq-20.yaml --probes 10000 --retest");
  auto& simulation = simulate_.simulation;
  add_whole(app, "--probes", simulation.probes, "how many probes, 2000 unless told");
  add_whole(app, "--stations", simulation.stations, "how many stations they are spread over, up to 40 unless told");
  add_whole(app, "--seed", simulation.seed, "what probes, stations and noise are drawn from, 1 unless told");
  app.add_option("--sheet", simulate_.sheet, "limit sheet instead of the configuration's")->type_name("FILE");
  app.add_option("--model", simulate_.model, "model; the sheet's unless told")->type_name("NAME");
  app.add_flag("--retest", simulation.retest, "test probes that failed again, as the sheet allows");
  app.add_option("--faults", simulate_.faults,
                 "which probes have a fault: none (unless told), lot (as the demonstration's), or a share such as 0.02")
      ->type_name("MIX");
  add_whole(app, "--threads", simulation.threads, "threads, as many as cores unless told; the answer is the same");
  add_json(app);
  answers(app, simulate_);
}

void Reader::add_measure() {
  CLI::App& measure = group("measure", "compute readings from a lab's own files");
  CLI::App& spectrum = command(measure, "spectrum", "wavelengths of one LED from a CSV file with wavelength_nm,signal",
                               "probewright measure spectrum red.csv --band red --slit-nm 2.5");
  spectrum.add_option("FILE", spectrum_.file, "CSV file; columns dark and response are used if there")
      ->required()
      ->type_name("");
  add_word(
      spectrum, "--band", {"red", "infrared"}, [this](const std::string& word) { spectrum_.band = word; },
      "which LED; found from the light unless told");
  add_number(spectrum, "--threshold", spectrum_.threshold,
             "part of the peak where the centroid's run ends, 0.01 unless told; 0: the whole line window");
  add_number(spectrum, "--temperature-C", spectrum_.temperature_C,
             "temperature of the probe; the wavelengths are then referred to 25 degC");
  add_number(spectrum, "--slit-nm", spectrum_.slit_nm,
             "width of the spectrometer's slit, taken out of the line's width");
  add_json(spectrum);
  answers(spectrum, spectrum_);
  CLI::App& pulses = command(measure, "pulses", "AC, DC, modulation and ratio of a pulse train from a CSV file",
                             "probewright measure pulses slots.csv --rate-Hz 5 --cycle-s 0.001756");
  pulses.add_option("FILE", pulses_.file, "CSV file: t_s,red,dark_a,infrared,dark_b or t_s,red,infrared")
      ->required()
      ->type_name("");
  add_number(pulses, "--rate-Hz", pulses_.rate_Hz, "rate of the modulation");
  add_number(pulses, "--cycle-s", pulses_.cycle_s, "length of one cycle of four slots; needed with dark slots");
  add_word(
      pulses, "--frequency", {"known", "free"},
      [this](const std::string& word) { pulses_.free_frequency = word == "free"; },
      "whether the rate is known or fitted too");
  add_json(pulses);
  answers(pulses, pulses_);
}

/// The command that was being read when the parser stopped.
const CLI::App& Reader::innermost() const {
  const CLI::App* app = &app_;
  for (auto within = app->get_subcommands(); !within.empty(); within = app->get_subcommands()) app = within.back();
  return *app;
}

Problem Reader::unexpected(const std::string& text) const {
  const CLI::App& app = innermost();
  std::vector<std::string> known;
  const bool is_option = text.starts_with("-");
  for (const CLI::App* level = &app; level && is_option; level = level->get_parent())
    for (const CLI::Option* option : level->get_options())
      for (const std::string& name : option->get_lnames()) known.push_back("--" + name);
  if (!is_option)
    for (const CLI::App* command : app.get_subcommands({})) known.push_back(command->get_name());
  const std::string nearest = yaml::nearest_word(text, known);
  const char* id = is_option ? (nearest.empty() ? "usage_unknown_option" : "usage_unknown_option_near")
                             : (nearest.empty() ? "usage_unknown_word" : "usage_unknown_word_near");
  return {id, full_name(app), {{"text", text}, {"nearest", nearest}, {"command", full_name(app)}}};
}

Problem Reader::missing(const std::string& what) const {
  const CLI::App& app = innermost();
  std::string commands;
  for (const CLI::App* command : app.get_subcommands({}))
    commands += (commands.empty() ? "" : ", ") + command->get_name();
  if (!commands.empty())
    return {"usage_no_command", full_name(app), {{"commands", commands}, {"command", full_name(app)}}};
  return {"usage_missing", full_name(app), {{"what", what}, {"command", full_name(app)}}};
}

Result<CommandLine> Reader::read(int argc, const char* const* argv) {
  if (argc > 0) program_ = argv[0];
  try {
    app_.parse(argc, argv);
  } catch (const CLI::CallForHelp&) {
    line_.request = ShowText{app_.help()};
    return line_;
  } catch (const Refused& refused) {
    return refused.problem;
  } catch (const CLI::ParseError& error) {
    const auto left = app_.remaining(true);
    const std::string name = full_name(innermost());
    if (!left.empty()) return unexpected(left.front());
    if (const auto* required = dynamic_cast<const CLI::RequiredError*>(&error)) {
      const std::string what = required->what();
      return missing(what.substr(0, what.find(" is required")));
    }
    const std::string what = error.what();
    if (dynamic_cast<const CLI::ArgumentMismatch*>(&error) && what.starts_with("--"))
      return Problem{"usage_no_value", name, {{"option", what.substr(0, what.find(':'))}, {"command", name}}};
    if (dynamic_cast<const CLI::RequiresError*>(&error))
      return Problem{
          "usage_together",
          name,
          {{"first", what.substr(0, what.find(' '))}, {"second", what.substr(what.rfind(' ') + 1)}, {"command", name}}};
    return Problem{"usage_other", name, {{"reason", what}, {"command", name}}};
  }
  if (version_)
    line_.request = ShowText{text::version_words(build_)};
  else if (app_.get_subcommands().empty())
    line_.request = ShowText{text::overview()};
  return line_;
}

}  // namespace

bool wants_json(int argc, const char* const* argv) {
  for (int i = 1; i < argc; ++i)
    if (std::strcmp(argv[i], "--json") == 0) return true;
  return false;
}

Result<CommandLine> read_command_line(int argc, const char* const* argv, const text::Build& build,
                                      const std::filesystem::path& installed) {
  return Reader{build, installed}.read(argc, argv);
}

}  // namespace probewright
