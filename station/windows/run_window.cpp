#include "station/windows/run_window.h"

#include <QStandardPaths>
#include <QStyleFactory>

#include "station/windows/frame/main_window.h"
#include "station/windows/frame/settings.h"
#include "station/windows/host_door.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line/line_page.h"
#include "station/windows/line/play_strip.h"
#include "station/windows/line/scan_field.h"
#include "station/windows/look/system_scheme.h"
#include "station/windows/setup/setup_page.h"
#include "station/windows/watchdog.h"
#include "station/windows/words/languages.h"

namespace probewright::windows {
namespace {

#ifdef NDEBUG
using Application = QApplication;
#else
using Application = WatchedApplication;
#endif

QString settings_file(const std::string& chosen) {
  if (!chosen.empty()) return QString::fromStdString(chosen);
  return QStandardPaths::writableLocation(QStandardPaths::GenericConfigLocation) +
         QStringLiteral("/probewright/windows.ini");
}

QStringList serial_patterns(const sequence::Configuration& configuration) {
  QStringList patterns;
  for (const auto& [name, model] : configuration.models) patterns << QString::fromStdString(model.value.serial_pattern);
  return patterns;
}

}  // namespace

bool has_display() {
  const auto is_set = [](const char* name) { return !qEnvironmentVariableIsEmpty(name); };
  return is_set("WAYLAND_DISPLAY") || is_set("DISPLAY") || is_set("QT_QPA_PLATFORM");
}

namespace {

/// What every window of the program needs.
class Surroundings {
 public:
  explicit Surroundings(const WindowOptions& options) : settings{settings_file(options.settings)} {
    QApplication::setStyle(QStyleFactory::create(QStringLiteral("Fusion")));
    languages.choose(options.language.empty() ? settings.language() : QString::fromStdString(options.language));
    look.set_scheme(settings.scheme());
    look.set_percent(settings.text_percent());
  }

 private:
  int count_ = 1;
  char name_[12] = "probewright";
  char* words_[2] = {name_, nullptr};
  Application application_{count_, words_};

 public:
  Settings settings;
  Languages languages;
  SystemScheme scheme{true};
  Look look{scheme};
};

}  // namespace

void close_window() {
  if (QCoreApplication* application = QCoreApplication::instance())
    QMetaObject::invokeMethod(
        application, [] { QCoreApplication::quit(); }, Qt::QueuedConnection);
}

int run_window(sequence::LineHost& host, WindowOptions options) {
  Surroundings around{options};
  HostDoor door{host};
  LineModel model{door};
  MainWindow window{{model, around.look, around.languages, around.settings, QString::fromStdString(options.version)}};
  window.line().scan_field().set_shown_forms(serial_patterns(host.configuration()));
  if (options.play != nullptr) window.add_row(new PlayStrip(*options.play, model, around.look));
  const Pump pump{options.feed, model};
  window.show();
  const int status = QApplication::exec();
  return status == 0 && !model.broken().isEmpty() ? 3 : status;
}

SetupEnd run_setup(SetupDoor& door, WindowOptions options) {
  Surroundings around{options};
  SetupPage page{door, around.look};
  page.setWindowTitle(QStringLiteral("Probewright"));
  page.resize(1000, 700);
  SetupEnd end = SetupEnd::left;
  const auto leave = [&](SetupEnd how) {
    end = how;
    page.close();
  };
  QObject::connect(&page, &SetupPage::kept, &page, [&] { leave(SetupEnd::kept); });
  QObject::connect(&page, &SetupPage::emulated_wanted, &page, [&] { leave(SetupEnd::emulated); });
  page.show();
  QApplication::exec();
  return end;
}

}  // namespace probewright::windows
