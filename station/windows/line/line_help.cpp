#include "station/windows/line/line_help.h"

#include <QCoreApplication>

namespace probewright::windows {
namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(Help)
};

Passage scanning() {
  return {Say::tr("What to scan"),
          Say::tr("The scan field always listens. Scan, or type and press Enter. The sentence below it says what was "
                  "done, or why not and what to do."),
          {{Say::tr("your badge"), Say::tr("signs you in; what is read from it is never shown")},
           {Say::tr("a lot card"), Say::tr("opens its lot")},
           {Say::tr("a probe's serial"),
            Say::tr("arms the next free nest for 20 seconds: put that probe into that nest and close the lid")},
           {QStringLiteral("nest 3"), Say::tr("the next serial is for nest 3")}}};
}

Passage berth() {
  return {
      Say::tr("What a berth shows"),
      {},
      {{Say::tr("Bar"),
        Say::tr("The checks of the run in their order, each as wide as its time. Full is done. A struck-out part was "
                "left out; a taller one failed.")},
       {Say::tr("Rails"),
        Say::tr("The two thick lines are the acceptance limits of every check, drawn to one scale; the dotted line "
                "is the middle, or what is typical. Each diamond is a reading, its vertical line the uncertainty. "
                "A crossed square lies outside. The reading that is nearest to an edge is named.")},
       {Say::tr("Grey posts"),
        Say::tr("How much of the limit is given up for uncertainty. The limit itself is at the far end of the "
                "post.")},
       {Say::tr("Small plots"),
        Say::tr("Spectra and pulses of the red LED (full line) and the infrared one (dashed line).")},
       {Say::tr("Below"), Say::tr("What to do with the probe; after a fail which check failed, by how much, and the "
                                  "likely cause.")}}};
}

Passage keys() {
  return {Say::tr("Keys"),
          Say::tr("Keyboard and scanner are enough for everything. These work while the scan field is empty."),
          {{Say::tr("Arrows"), Say::tr("choose a berth")},
           {Say::tr("Enter"), Say::tr("the readings of the chosen berth's last run; Enter or Esc closes them")},
           {QStringLiteral("F8"), Say::tr("stop the chosen nest, or take its scan back; asks first")},
           {QStringLiteral("F9"), Say::tr("sign out")},
           {Say::tr("Ctrl and +, -, 0"), Say::tr("larger text, smaller text, as at first")},
           {QStringLiteral("F10"), Say::tr("the menu")},
           {QStringLiteral("F1"), Say::tr("this page")}}};
}

Passage trouble() {
  return {Say::tr("When something is wrong"),
          {},
          {{Say::tr("Not ready"), Say::tr("The top of the window and the berth say why, and what to do. Nothing can be "
                                          "tested there until then.")},
           {Say::tr("Void"),
            Say::tr("The run could not be completed or trusted. The probe has neither passed nor failed.")},
           {Say::tr("A run stops"),
            Say::tr("Opening the lid or taking the probe out stops the run. After a reading outside its limits, that "
                    "is a fail.")},
           {Say::tr("Power cut"),
            Say::tr("At the next start the window tells which probe was in which nest. A run that was cut short is "
                    "never a pass.")}}};
}

}  // namespace

std::vector<Passage> line_help() { return {scanning(), berth(), keys(), trouble()}; }

}  // namespace probewright::windows
