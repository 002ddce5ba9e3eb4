#pragma once
#include <QWidget>
#include <memory>
#include <vector>

class QStackedWidget;
class QHBoxLayout;
class QMenu;

namespace probewright::windows {

class Label;
class Languages;
class LineModel;
class LinePage;
class Look;
class PlayStrip;
class ReadinessStrip;
class Settings;
class Sheet;
class WordButton;

/// What the frame needs; all of it outlives the window.
struct WindowParts {
  LineModel& model;
  Look& look;
  Languages& languages;
  Settings& settings;
  QString version;  ///< as --version prints it
};

/// The station's window: names of the workspaces, the readiness strip, the menu, and the workspace below.
class MainWindow : public QWidget {
  Q_OBJECT
 public:
  explicit MainWindow(WindowParts parts);
  ~MainWindow() override;

  LinePage& line() { return *line_; }
  /// Adds a workspace behind those that are there. `name` is translated in the context "Workspace" whenever the
  /// language changes; `key` names it in the settings.
  void add_workspace(const QString& key, const char* name, QWidget* page);
  void choose_workspace(std::size_t index);
  /// A row below the header, for the emulated bench.
  void add_row(QWidget* row);
  void show_help();
  void show_about();

 protected:
  void resizeEvent(QResizeEvent* event) override;
  void changeEvent(QEvent* event) override;
  void closeEvent(QCloseEvent* event) override;
  void paintEvent(QPaintEvent* event) override;

 private:
  struct Workspace {
    QString key;
    const char* name;
    WordButton* button;
  };
  void make_header();
  void make_keys();
  void restore();
  void make_menu();
  void add_look_entries(QMenu& menu);
  void add_language_entries(QMenu& menu);
  void open_menu();
  void larger(int by);
  void say();
  void dress();
  void place_sheet();
  void sound(int nest);

  WindowParts parts_;
  QHBoxLayout* names_;
  QHBoxLayout* header_;
  ReadinessStrip* strip_;
  Label* demonstration_;
  WordButton* menu_button_;
  QStackedWidget* stack_;
  Sheet* sheet_;
  LinePage* line_;
  std::unique_ptr<QMenu> menu_;
  std::vector<Workspace> workspaces_;
};

}  // namespace probewright::windows
