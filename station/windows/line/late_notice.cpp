#include "station/windows/line/late_notice.h"

#include <QCoreApplication>

#include "station/windows/line/berth_content.h"

namespace probewright::windows {
namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(LateNotice)
};

QString to_do(const sequence::ClosedLate& closed) {
  return closed.verdict == sequence::RunVerdict::fail
             ? Say::tr(
                   "A reading already lay outside its limits, so the run was closed as a fail. Take the probe out and "
                   "put it on the tray for failed probes.")
             : Say::tr(
                   "The run was closed as void: nothing was decided. Take the probe out; scan it again to test it.");
}

}  // namespace

std::vector<Passage> late_notice(const std::vector<sequence::ClosedLate>& closed) {
  Passage runs{{}, Say::tr("The program ended last time in the middle of these runs. Look into each nest first."), {}};
  for (const auto& run : closed)
    runs.pairs.emplace_back(Say::tr("Nest %1").arg(run.nest) + QLatin1Char('\n') + QString::fromStdString(run.serial),
                            to_do(run));
  return {runs, {{}, Say::tr("Their readings up to then are in the ledger. Press Enter to go on."), {}}};
}

}  // namespace probewright::windows
