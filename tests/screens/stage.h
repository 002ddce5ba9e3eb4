#pragma once
#include <QImage>
#include <QLineEdit>
#include <QTemporaryDir>
#include <memory>

#include "fake_line.h"
#include "station/windows/frame/main_window.h"
#include "station/windows/frame/settings.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line/line_page.h"
#include "station/windows/look/look.h"
#include "station/windows/look/system_scheme.h"
#include "station/windows/words/languages.h"

namespace probewright::windows {

/// How a window is shown.
struct Showing {
  QSize size{1280, 800};
  bool dark = false;
  int percent = 100;
  QString language = QStringLiteral("en");
};

/// A whole window over a fake line, shown without a display.
class Stage {
 public:
  explicit Stage(const Scene& scene, const Showing& showing = {}, std::vector<sequence::ClosedLate> late = {});
  ~Stage();

  FakeLine line;
  QTemporaryDir folder;
  std::unique_ptr<Settings> settings;
  Languages languages;
  SystemScheme scheme{false};
  Look look{scheme};
  std::unique_ptr<LineModel> model;
  std::unique_ptr<MainWindow> window;

  QLineEdit& edit();
  void show(const sequence::LineView& view);
  /// A widget by its object name; the test fails without it.
  template <class Widget>
  Widget& find(const char* name) {
    auto* found = window->findChild<Widget*>(QLatin1String(name));
    if (!found) throw std::runtime_error(std::string{"no widget is called "} + name);
    return *found;
  }
  /// What is on the screen; kept as NAME.png in the folder $PW_KEEP_SCREENS if that is set.
  QImage picture(const QString& name);
};

}  // namespace probewright::windows
