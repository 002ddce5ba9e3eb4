#include <gtest/gtest.h>

#include <QApplication>
#include <QMenu>
#include <QTest>

#include "stage.h"
#include "station/windows/line/berth_grid.h"
#include "station/windows/look/label.h"
#include "station/windows/look/word_button.h"
#include "station/windows/words/languages.h"

namespace probewright::windows {
namespace {

QAction* entry(QMenu& menu, const QString& words) {
  for (QAction* action : menu.actions()) {
    if (action->text() == words) return action;
    if (action->menu())
      if (QAction* found = entry(*action->menu(), words)) return found;
  }
  return nullptr;
}

QMenu& open_menu(Stage& stage) {
  QTest::keyClick(&stage.edit(), Qt::Key_F10);
  auto* menu = stage.window->findChild<QMenu*>("menu_list");
  if (!menu) throw std::runtime_error("no menu");
  return *menu;
}

TEST(Frame, FollowsTheSystemUntilToldOtherwise) {
  Stage stage{busy_scene(1)};
  stage.look.set_scheme(Scheme::system);
  stage.scheme.take(1);
  EXPECT_TRUE(stage.look.dark());
  stage.scheme.take(2);
  EXPECT_FALSE(stage.look.dark());
  entry(open_menu(stage), "Dark")->trigger();
  EXPECT_TRUE(stage.look.dark());
  stage.scheme.take(2);
  EXPECT_TRUE(stage.look.dark());
  EXPECT_EQ(stage.settings->scheme(), Scheme::dark);
}

TEST(Frame, TextGrowsByKeysFrom100To200AndIsRemembered) {
  Stage stage{busy_scene(4)};
  const int before = stage.find<Label>("readiness").font().pixelSize();
  for (int i = 0; i < 20; ++i) QTest::keyClick(&stage.edit(), Qt::Key_Plus, Qt::ControlModifier);
  EXPECT_EQ(stage.look.type().percent(), 200);
  EXPECT_EQ(stage.find<Label>("readiness").font().pixelSize(), 2 * before);
  EXPECT_EQ(stage.settings->text_percent(), 200);
  stage.picture("nests4_200");
  QTest::keyClick(&stage.edit(), Qt::Key_0, Qt::ControlModifier);
  EXPECT_EQ(stage.look.type().percent(), 100);
}

TEST(Frame, LanguageChangesAtOnceAndBack) {
  Stage stage{busy_scene(4)};
  entry(open_menu(stage), "Deutsch")->trigger();
  QApplication::processEvents();
  EXPECT_EQ(stage.find<Label>("readiness").text(), "Bereit");
  EXPECT_EQ(stage.window->line().grid().berths()[0]->content().headline, "Gut");
  EXPECT_EQ(stage.find<WordButton>("workspace_line").text(), "Linie");
  EXPECT_EQ(stage.settings->language(), "de");
  entry(open_menu(stage), "Español")->trigger();
  QApplication::processEvents();
  EXPECT_EQ(stage.find<Label>("readiness").text(), "Listo");
  stage.picture("nests4_es");
  entry(open_menu(stage), "English")->trigger();
  QApplication::processEvents();
  EXPECT_EQ(stage.find<Label>("readiness").text(), "Ready");
}

TEST(Frame, RemembersItsSize) {
  QByteArray kept;
  {
    Stage stage{busy_scene(1), {QSize{1001, 703}}};
    stage.window->close();
    kept = stage.settings->geometry();
  }
  ASSERT_FALSE(kept.isEmpty());
  Stage stage{busy_scene(1)};
  stage.settings->keep_geometry(kept);
  MainWindow again{{*stage.model, stage.look, stage.languages, *stage.settings, "1"}};
  EXPECT_EQ(again.size(), QSize(1001, 703));
}

TEST(Frame, ADamagedSettingsFileIsAsNone) {
  QTemporaryDir folder;
  QFile file{folder.filePath("windows.ini")};
  ASSERT_TRUE(file.open(QIODevice::WriteOnly));
  file.write("colours=mauve\ntext_percent=rather large\n[[[\x01\xff=\n");
  file.close();
  const Settings settings{file.fileName()};
  EXPECT_EQ(settings.scheme(), Scheme::system);
  EXPECT_EQ(settings.text_percent(), 100);
  EXPECT_TRUE(settings.language().isEmpty());
  EXPECT_FALSE(settings.sound());
}

TEST(Frame, AnotherWorkspaceOnlyNeedsAdding) {
  Stage stage{busy_scene(1)};
  auto* page = new QWidget;
  stage.window->add_workspace("limits", "Limits", page);
  EXPECT_FALSE(page->isVisible());
  QTest::keyClick(&stage.edit(), Qt::Key_2, Qt::ControlModifier);
  EXPECT_TRUE(page->isVisible());
  EXPECT_EQ(stage.settings->workspace(), "limits");
  QTest::mouseClick(&stage.find<WordButton>("workspace_line"), Qt::LeftButton);
  EXPECT_FALSE(page->isVisible());
  EXPECT_TRUE(stage.edit().hasFocus());
}

// Whoever hears the screen finds a name at everything that can be acted on or read.
TEST(Frame, EverythingHasAnAccessibleName) {
  Stage stage{busy_scene(4)};
  const auto named = [](const QWidget* widget) {
    const auto* label = qobject_cast<const QLabel*>(widget);
    const auto* button = qobject_cast<const QAbstractButton*>(widget);
    return !widget->accessibleName().isEmpty() || (label && !label->text().isEmpty()) ||
           (button && !button->text().isEmpty());
  };
  for (const Berth* berth : stage.window->line().grid().berths()) EXPECT_TRUE(named(berth));
  for (const QLabel* label : stage.window->findChildren<QLabel*>())
    if (label->isVisible() && !label->text().isEmpty()) EXPECT_TRUE(named(label));
  for (const QAbstractButton* button : stage.window->findChildren<QAbstractButton*>()) EXPECT_TRUE(named(button));
  EXPECT_TRUE(named(&stage.edit()));
  EXPECT_TRUE(named(&stage.find<QWidget>("tally")));
}

}  // namespace
}  // namespace probewright::windows
