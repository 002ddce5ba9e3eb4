#include "station/text/history_words.h"
#include "station/text/ledger_file.h"
#include "station/text/plant_zone.h"
#include "station/text/report_page.h"
#include "station/trace/words.h"

namespace probewright::text {
namespace {

std::string story_words(const trace::RunStory& story) {
  std::string text = story.run.opened.serial + "\n\n" + words_of(story.run) + "\n";
  for (const db::LabelRecord& label : story.labels)
    text += "Label: " + label.kind + (label.copy > 1 ? ", copy " + std::to_string(label.copy) : "") + ", entry " +
            std::to_string(label.entry) + (label.reason.empty() ? "" : ": " + label.reason) + "\n";
  for (const std::string& missing : story.not_drawn) text += "Plot: " + missing + "\n";
  return text + words_of(story.seal) + "\n";
}

Json label_json(const db::LabelRecord& label) {
  Json json = Json::object();
  json.set("entry", label.entry).set("time", to_text(label.made_at)).set("who", label.who);
  json.set("run", label.run.value).set("kind", label.kind).set("copy", label.copy).set("reason", label.reason);
  return std::move(json.set("code", label.code));
}

Json story_json(const trace::RunStory& story, const std::string& page) {
  Json labels = Json::array(), missing = Json::array();
  for (const db::LabelRecord& label : story.labels) labels.add(label_json(label));
  for (const std::string& words : story.not_drawn) missing.add(words);
  Json json = Json::object();
  json.set("format", 1).set("serial", story.run.opened.serial);
  json.set("seal", to_hex(story.seal.hash)).set("seal_entry", story.seal.entry);
  json.set("run", json_of(story.run)).set("labels", std::move(labels)).set("not_drawn", std::move(missing));
  return std::move(json.set("report", page.empty() ? Json{} : Json{page}));
}

}  // namespace

int report_run(const ReportRunOptions& options, PageMaker* pages, Console& console) {
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  const auto story = trace::run_story(*reader, options.entry);
  if (!story) return console.refuse(story.error(), answer_is_no);
  const trace::PageNotes notes = page_notes(plant_zone(*reader, options.choice, console), *file, story->seal);
  const auto page =
      write_page(options, "run-" + std::to_string(story->run.run.value) + ".pdf", pages, console,
                 [&](PageMaker& maker, const std::string& pdf) { return maker.run_report(*story, notes, pdf); });
  if (!page) return console.refuse(page.error());
  if (console.json())
    console.print_json(story_json(*story, options.out));
  else
    console.print_text(story_words(*story) + *page + "\n");
  return done;
}

}  // namespace probewright::text
