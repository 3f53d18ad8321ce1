#include "printing.hpp"

#include <algorithm>
#include <bathwright/base/whole_file.hpp>

#include "work/print_command.hpp"

namespace bathwright::desktop {
namespace {

constexpr std::size_t most_files = 30;

}  // namespace

std::string print(PrintedSheet& sheet) {
  const auto pdf = sheets::pdf_of(sheet.page, sheet.paper);
  const Outcome written = pdf ? write_whole(sheet.file, *pdf) : Outcome(pdf.problems());
  if (written) return "To print: " + sheet.file.string() + ".";
  sheet.file.clear();
  return "It could not be printed: " + text(written.problems());
}

Printing::Printing(const std::function<void()>& wake)
    : sending_(wake),
      preview_job_(
          [](const std::shared_ptr<const PrintedSheet>& sheet, const std::stop_token&, const auto& give) {
            constexpr double dots_per_inch = 115;  // A4 about as wide as the page of the window
            Preview preview;
            auto pictures = sheets::pictures_of(sheet->page, sheet->paper, dots_per_inch);
            if (!pictures) preview.problems = pictures.problems();
            if (pictures)
              for (sheets::Picture& picture : std::vector<sheets::Picture>(*std::move(pictures)))
                preview.sheets.push_back(std::make_shared<const sheets::Picture>(std::move(picture)));
            give(std::move(preview));
          },
          wake) {}

void Printing::look_in(const std::filesystem::path& folder) {
  folder_ = folder;
  last_.reset();
  close();
  read_folder();
}

void Printing::read_folder() {
  std::vector<std::pair<std::filesystem::file_time_type, std::string>> found;
  std::error_code failed;
  for (const auto& entry : std::filesystem::directory_iterator(folder_, failed))
    if (entry.path().extension() == ".pdf")
      found.emplace_back(entry.last_write_time(failed), entry.path().filename().string());
  std::ranges::sort(found, std::greater{});
  files_.clear();
  for (auto& [time, name] : found)
    if (files_.size() < most_files) files_.push_back(std::move(name));
}

void Printing::add(std::shared_ptr<const PrintedSheet> sheet) {
  if (sheet->file.parent_path() != folder_) return;  // signed in a shop that was left meanwhile
  last_ = std::move(sheet);
  read_folder();
}

void Printing::show() {
  if (files_.empty() && !last_) return;
  shown_ = true;
  preview_.reset();
  said_.clear();
  fault_.clear();
  if (last_) preview_job_.ask(last_);
}

void Printing::close() {
  shown_ = false;
  preview_.reset();
}

void Printing::send(const std::string& command, const std::string& file) {
  if (sending_.busy() || std::ranges::find(files_, file) == files_.end()) return;
  said_.clear();
  fault_.clear();
  sending_.start([command, path = folder_ / file]() -> Result<std::string> {
    if (const Outcome sent = work::print_file(command, path); !sent) return sent.problems();
    return "Sent to the printer: " + path.filename().string() + ".";
  });
}

bool Printing::update() {
  bool changed = false;
  if (auto answer = preview_job_.take()) {
    changed = true;
    preview_ = std::move(answer);
    fault_ = text(preview_->problems);
  }
  if (auto came = sending_.take()) {
    changed = true;
    (*came ? said_ : fault_) = *came ? **came : text(came->problems());
  }
  return changed;
}

PrintedView Printing::view(const std::string& command) const {
  PrintedView view;
  view.folder = folder_.string();
  if (last_) view.file = last_->file.filename().string();
  view.files = files_;
  view.open = shown_;
  view.printing = sending_.busy();
  view.command = command;
  view.said = said_;
  view.fault = fault_;
  if (preview_) view.sheets = preview_->sheets;
  return view;
}

}  // namespace bathwright::desktop
