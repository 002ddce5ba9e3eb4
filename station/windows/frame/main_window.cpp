#include "station/windows/frame/main_window.h"

#include <QApplication>
#include <QCloseEvent>
#include <QHBoxLayout>
#include <QMenu>
#include <QPainter>
#include <QShortcut>
#include <QStackedWidget>
#include <QTimer>
#include <QVBoxLayout>

#include "station/base/numbers.h"
#include "station/windows/frame/about.h"
#include "station/windows/frame/readiness_strip.h"
#include "station/windows/frame/settings.h"
#include "station/windows/frame/sheet.h"
#include "station/windows/line/line_help.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line/line_page.h"
#include "station/windows/look/label.h"
#include "station/windows/look/word_button.h"
#include "station/windows/words/languages.h"

namespace probewright::windows {

MainWindow::MainWindow(WindowParts parts)
    : parts_(std::move(parts)),
      names_(new QHBoxLayout),
      header_(new QHBoxLayout),
      strip_(new ReadinessStrip(parts_.model, parts_.look)),
      demonstration_(new Label(parts_.look, Text::strong, Tone::wait)),
      menu_button_(new WordButton(parts_.look, Text::body)),
      stack_(new QStackedWidget) {
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(0);
  make_header();
  column->addLayout(header_);
  column->addWidget(stack_, 1);
  sheet_ = new Sheet(parts_.look, this);
  line_ = new LinePage(parts_.model, parts_.look, *sheet_);
  add_workspace(QStringLiteral("line"), QT_TRANSLATE_NOOP("Workspace", "Line"), line_);
  make_keys();
  connect(&parts_.look, &Look::changed, this, &MainWindow::dress);
  connect(&parts_.model, &LineModel::view_changed, this, &MainWindow::say);
  connect(&parts_.model, &LineModel::run_ended, this, &MainWindow::sound);
  dress();
  say();
  restore();
  line_->setFocus();
  line_->show_late_notice();
}

MainWindow::~MainWindow() = default;

void MainWindow::make_header() {
  header_->addLayout(names_);
  header_->addWidget(strip_, 1);
  header_->addWidget(demonstration_, 0, Qt::AlignVCenter);
  header_->addWidget(menu_button_, 0, Qt::AlignVCenter);
  demonstration_->setObjectName(QStringLiteral("demonstration"));
  demonstration_->setAlignment(Qt::AlignCenter);
  menu_button_->setObjectName(QStringLiteral("menu"));
  connect(menu_button_, &WordButton::clicked, this, &MainWindow::open_menu);
}

void MainWindow::make_keys() {
  const auto key = [this](const QKeySequence& keys, auto act) {
    auto* shortcut = new QShortcut(keys, this);
    connect(shortcut, &QShortcut::activated, this, act);
  };
  key(Qt::Key_F1, [this] { show_help(); });
  key(Qt::Key_F8, [this] { line_->stop_chosen(); });
  key(Qt::Key_F9, [this] { line_->sign_out(); });
  key(Qt::Key_F10, [this] { open_menu(); });
  key(Qt::Key_Escape, [this] { sheet_->shut(); });
  key(Qt::Key_PageDown, [this] { sheet_->scroll(8); });
  key(Qt::Key_PageUp, [this] { sheet_->scroll(-8); });
  key(Qt::CTRL | Qt::Key_Plus, [this] { larger(10); });
  key(Qt::CTRL | Qt::Key_Equal, [this] { larger(10); });  // plus without shift
  key(Qt::CTRL | Qt::Key_Minus, [this] { larger(-10); });
  key(Qt::CTRL | Qt::Key_0, [this] { larger(100 - parts_.look.type().percent()); });
}

void MainWindow::restore() {
  if (!restoreGeometry(parts_.settings.geometry())) resize(1280, 800);
  for (std::size_t i = 0; i < workspaces_.size(); ++i)
    if (workspaces_[i].key == parts_.settings.workspace()) choose_workspace(i);
}

void MainWindow::add_workspace(const QString& key, const char* name, QWidget* page) {
  auto* button = new WordButton(parts_.look, Text::workspace);
  button->setObjectName(QStringLiteral("workspace_") + key);
  button->setCheckable(true);
  button->setAutoExclusive(true);
  const std::size_t index = workspaces_.size();
  connect(button, &WordButton::clicked, this, [this, index] { choose_workspace(index); });
  auto* shortcut =
      new QShortcut(QKeySequence{static_cast<int>(Qt::CTRL) | (Qt::Key_1 + static_cast<int>(index))}, this);
  connect(shortcut, &QShortcut::activated, this, [this, index] { choose_workspace(index); });
  workspaces_.push_back({key, name, button});
  names_->addWidget(button);
  stack_->addWidget(page);
  button->setText(QCoreApplication::translate("Workspace", name));
  if (index == 0) button->setChecked(true);
}

void MainWindow::choose_workspace(std::size_t index) {
  workspaces_[index].button->setChecked(true);
  stack_->setCurrentIndex(static_cast<int>(index));
  stack_->currentWidget()->setFocus();
  parts_.settings.keep_workspace(workspaces_[index].key);
}

void MainWindow::add_row(QWidget* row) {
  static_cast<QVBoxLayout*>(layout())->insertWidget(1, row);
  place_sheet();
}

void MainWindow::say() {
  const auto& view = parts_.model.view();
  setWindowTitle(QStringLiteral("Probewright, ") + QString::fromStdString(view.station));
  demonstration_->setVisible(view.emulated);
  if (view.emulated)
    demonstration_->say(view.speed == 1.0
                            ? tr("Demonstration")
                            : tr("Demonstration\nat speed %1").arg(QString::fromStdString(shortest(view.speed))));
  for (const Workspace& workspace : workspaces_)
    workspace.button->setText(QCoreApplication::translate("Workspace", workspace.name));
  if (const QString words = tr("Menu (F10)"); words != menu_button_->text()) {
    menu_button_->setText(words);
    menu_button_->updateGeometry();
  }
}

void MainWindow::dress() {
  const auto px = [this](double length) { return static_cast<int>(parts_.look.type().length(length)); };
  header_->setContentsMargins(px(14), px(7), px(14), px(7));
  header_->setSpacing(px(16));
  names_->setSpacing(px(14));
  setMinimumSize(800, 560);
  update();
}

void MainWindow::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  const Colours& colours = parts_.look.colours();
  painter.fillRect(rect(), colours.paper);
  const QRect header = header_->geometry();
  painter.fillRect(QRect{0, 0, width(), header.bottom() + 1}, colours.card);
  painter.fillRect(QRect{0, header.bottom() + 1, width(), 1}, colours.hairline);
}

void MainWindow::place_sheet() {
  const int top = stack_->geometry().top(), gap = static_cast<int>(parts_.look.type().length(9));
  // The scan field stays in sight: what is scanned while the sheet is open counts.
  const int bottom = line_->isVisible() ? stack_->geometry().top() + line_->scan_top() : height();
  sheet_->set_room({gap, top + gap, width() - 2 * gap, bottom - top - 2 * gap});
}

void MainWindow::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  QTimer::singleShot(0, this, &MainWindow::place_sheet);  // after the layout
}

void MainWindow::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) say();
}

void MainWindow::closeEvent(QCloseEvent* event) {
  parts_.settings.keep_geometry(saveGeometry());
  event->accept();
}

void MainWindow::show_help() {
  sheet_->kind() == QLatin1String("help")
      ? sheet_->shut()
      : sheet_->open(QStringLiteral("help"), tr("Help: the line"), make_text_page(parts_.look, line_help()));
}

void MainWindow::show_about() {
  sheet_->open(QStringLiteral("about"), tr("About Probewright"),
               make_text_page(parts_.look, about_passages(parts_.version)));
}

void MainWindow::larger(int by) {
  parts_.look.set_percent(parts_.look.type().percent() + by);
  parts_.settings.keep_text_percent(parts_.look.type().percent());
  QTimer::singleShot(0, this, &MainWindow::place_sheet);
}

/// One beep for a pass, two for anything else.
void MainWindow::sound(int nest) {
  if (!parts_.settings.sound()) return;
  QApplication::beep();
  const auto* outcome = parts_.model.last_outcome(nest);
  if (outcome && outcome->verdict != sequence::RunVerdict::pass)
    QTimer::singleShot(250, this, [] { QApplication::beep(); });
}

void MainWindow::open_menu() {
  make_menu();
  menu_->popup(menu_button_->mapToGlobal(QPoint{0, menu_button_->height()}));
}

void MainWindow::make_menu() {
  menu_ = std::make_unique<QMenu>(this);
  menu_->setObjectName(QStringLiteral("menu_list"));
  menu_->addAction(tr("Sign out"), QKeySequence{Qt::Key_F9}, this, [this] { line_->sign_out(); });
  menu_->addAction(tr("Stop the chosen nest"), QKeySequence{Qt::Key_F8}, this, [this] { line_->stop_chosen(); });
  menu_->addAction(tr("Close the lot"), this, [this] { line_->close_lot(); });
  menu_->addSeparator();
  add_look_entries(*menu_);
  add_language_entries(*menu_);
  auto* sound = menu_->addAction(tr("Sound at a verdict"), this, [this](bool on) { parts_.settings.keep_sound(on); });
  sound->setCheckable(true);
  sound->setChecked(parts_.settings.sound());
  menu_->addSeparator();
  menu_->addAction(tr("Help"), QKeySequence{Qt::Key_F1}, this, &MainWindow::show_help);
  menu_->addAction(tr("About Probewright"), this, &MainWindow::show_about);
  menu_->addAction(tr("Leave"), this, &QWidget::close);
}

void MainWindow::add_look_entries(QMenu& menu) {
  auto* colours = menu.addMenu(tr("Colours"));
  for (const auto& [words, scheme] : {std::pair{tr("As the system"), Scheme::system},
                                      std::pair{tr("Light"), Scheme::light}, std::pair{tr("Dark"), Scheme::dark}}) {
    auto* entry = colours->addAction(words, this, [this, wanted = scheme] {
      parts_.look.set_scheme(wanted);
      parts_.settings.keep_scheme(wanted);
    });
    entry->setCheckable(true);
    entry->setChecked(parts_.look.scheme() == scheme);
  }
  auto* sizes = menu.addMenu(tr("Text size"));
  for (const int percent : {100, 125, 150, 175, 200}) {
    auto* entry = sizes->addAction(QStringLiteral("%1 %").arg(percent), this,
                                   [this, percent] { larger(percent - parts_.look.type().percent()); });
    entry->setCheckable(true);
    entry->setChecked(parts_.look.type().percent() == percent);
  }
}

void MainWindow::add_language_entries(QMenu& menu) {
  auto* languages = menu.addMenu(tr("Language"));
  for (const QString& language : Languages::all()) {
    auto* entry = languages->addAction(Languages::own_name(language), this, [this, language] {
      parts_.settings.keep_language(language);
      parts_.languages.choose(language);
    });
    entry->setCheckable(true);
    entry->setChecked(parts_.languages.current() == language);
  }
}

}  // namespace probewright::windows
