#include "station/windows/frame/about.h"

#include <QCoreApplication>
#include <QRegularExpression>

#include "station/base/cautions.h"

namespace probewright::windows {
namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(About)
};

}  // namespace

QString caution_words() {
  const QString words = QCoreApplication::translate("Cautions", cautions);
  return QString{words}
      .replace(QStringLiteral(".\n"), QStringLiteral(".\n\n"))
      .replace(QRegularExpression{QStringLiteral("([^\\n])\\n([^\\n])")}, QStringLiteral("\\1 \\2"));
}

std::vector<Passage> about_passages(const QString& version) {
  return {
      {{}, Say::tr("Probewright tests pulse-oximetry probes on a production station and keeps the evidence."), {}},
      {Say::tr("What a pass says, and what it does not"), caution_words(), {}},
      {Say::tr("This program"), version, {}},
  };
}

}  // namespace probewright::windows
