#include "stage.h"

#include <QApplication>
#include <QDir>
#include <QTest>

#include "station/windows/line/scan_field.h"

namespace probewright::windows {

Stage::Stage(const Scene& scene, const Showing& showing, std::vector<sequence::ClosedLate> late) {
  line.now = scene.view;
  line.late = std::move(late);
  settings = std::make_unique<Settings>(folder.filePath("windows.ini"));
  languages.choose(showing.language);
  look.set_scheme(showing.dark ? Scheme::dark : Scheme::light);
  look.set_percent(showing.percent);
  model = std::make_unique<LineModel>(line);
  window = std::make_unique<MainWindow>(
      WindowParts{*model, look, languages, *settings, QStringLiteral("probewright 0.1.0")});
  window->line().scan_field().set_shown_forms({QStringLiteral("AQ20-[0-9]{3}-[0-9]{5}")});
  window->resize(showing.size);
  window->show();
  for (const auto& outcome : scene.outcomes) model->hear(sequence::RunEnded{outcome});
  (void)QTest::qWaitForWindowActive(window.get());
  QApplication::processEvents();
}

Stage::~Stage() {
  window.reset();
  languages.choose(QStringLiteral("en"));
}

QLineEdit& Stage::edit() { return *window->line().scan_field().edit(); }

void Stage::show(const sequence::LineView& view) {
  line.now = view;
  model->take(std::make_shared<sequence::LineView>(view));
  QApplication::processEvents();
}

QImage Stage::picture(const QString& name) {
  QApplication::processEvents();
  const QImage image = window->grab().toImage();
  const QString kept = qEnvironmentVariable("PW_KEEP_SCREENS");
  if (!kept.isEmpty()) {
    QDir{}.mkpath(kept);
    image.save(kept + QLatin1Char('/') + name + QStringLiteral(".png"));
  }
  return image;
}

}  // namespace probewright::windows
