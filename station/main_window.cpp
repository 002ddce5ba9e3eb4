#include "station/main_window.h"

#include "station/windows/line_feed.h"
#include "station/windows/run_window.h"

namespace probewright {
namespace {

class Window final : public text::LineWindow {
 public:
  explicit Window(std::string version) : version_(std::move(version)) {}
  sequence::LineHost::Listener listener() override { return feed_.listener(); }
  int open(sequence::LineHost& host) override {
    windows::WindowOptions options;
    options.version = version_;
    options.feed = &feed_;
    return windows::run_window(host, options);
  }
  void close() override { windows::close_window(); }

 private:
  std::string version_;
  windows::LineFeed feed_;
};

}  // namespace

std::unique_ptr<text::LineWindow> line_window(const std::string& version) {
  if (!windows::has_display()) return nullptr;
  return std::make_unique<Window>(version);
}

}  // namespace probewright
