#include "station/text/overview.h"

#include "station/base/cautions.h"

namespace probewright::text {

std::string overview() {
  return std::string{
             "probewright tests pulse-oximetry probes on a production station and keeps the evidence.\n"
             "\n"
             "  demo       a lot of probes with planted faults, tested without any hardware\n"
             "  line       run the station: scan badges, lot cards and probes, test in all nests\n"
             "  bench      emulated devices on pseudo-terminals, to work without hardware\n"
             "  test       test one probe in one nest\n"
             "  replay     make a recorded run again from its bytes and compare\n"
             "  recording  show, cut: look into recordings of what went over the lines\n"
             "  checkup    say what is wrong with the station and how to mend it\n"
             "  trace      print all that is known of a serial, a lot, a person, a day, an entry\n"
             "  report     run, serial, shift: PDF with plots, and the data as JSON\n"
             "  label      the label of a serial's last production run, kept in the ledger\n"
             "  ledger     verify, seal: check a ledger, print its newest hash\n"
             "  limits     check, diff: faults of a limit sheet, what changed between two\n"
             "  simulate   yield, false accepts and false rejects of a sheet, estimated by simulation\n"
             "  measure    spectrum, pulses: readings from a lab's own files\n"
             "\n"
             "Each command answers --help with an example. To begin without hardware:\n"
             "\n"
             "  probewright demo --headless\n"
             "\n"
             "or, to see each part by itself:\n"
             "\n"
             "  probewright bench                                in one terminal\n"
             "  probewright test AQ20-048-00001                  in another\n"
             "\n"} +
         cautions + "\n";
}

std::string version_words(const Build& build) {
  return "probewright " + build.version + "\ncommit " + build.commit + "\ncompiler " + build.compiler + "\n";
}

}  // namespace probewright::text
