// Work that would hold up a picture, on a thread of its own: of several requests only the newest is done.
#pragma once

#include <condition_variable>
#include <functional>
#include <mutex>
#include <optional>
#include <stop_token>
#include <thread>
#include <utility>

namespace bathwright::desktop {

template <class Question, class Answer>
class LatestJob {
 public:
  /// Gives an answer, a better one after a first where there is more to work out.
  using Give = std::function<void(Answer)>;
  using Work = std::function<void(const Question&, const std::stop_token&, const Give&)>;

  /// `work` runs on the thread and may look at the token to end early: a newer question or the end of the
  /// program stops it. `done` is called on the thread when an answer waits or the work has ended.
  LatestJob(Work work, std::function<void()> done)
      : work_(std::move(work)),
        done_(std::move(done)),
        thread_([this](const std::stop_token& end) { run(end); }) {}

  ~LatestJob() {
    thread_.request_stop();
    {
      const std::lock_guard lock(mutex_);
      stop_current_.request_stop();
    }
    wake_.notify_all();
  }
  LatestJob(const LatestJob&) = delete;
  LatestJob& operator=(const LatestJob&) = delete;

  /// Drops what was asked before and is not answered yet.
  void ask(Question question) {
    {
      const std::lock_guard lock(mutex_);
      asked_ = std::move(question);
      answer_.reset();
      stop_current_.request_stop();
    }
    wake_.notify_all();
  }

  /// Ends what is being worked out; what was given so far stays.
  void stop() {
    const std::lock_guard lock(mutex_);
    asked_.reset();
    stop_current_.request_stop();
  }

  /// The newest answer to the newest question, once.
  [[nodiscard]] std::optional<Answer> take() {
    const std::lock_guard lock(mutex_);
    return std::exchange(answer_, std::nullopt);
  }

  [[nodiscard]] bool working() const {
    const std::lock_guard lock(mutex_);
    return busy_ || asked_;
  }

 private:
  void run(const std::stop_token& end) {
    while (!end.stop_requested()) {
      std::optional<Question> question;
      std::stop_token stop;
      {
        std::unique_lock lock(mutex_);
        wake_.wait(lock, [&] { return asked_ || end.stop_requested(); });
        if (end.stop_requested()) return;
        question.swap(asked_);
        stop_current_ = std::stop_source();
        stop = stop_current_.get_token();
        busy_ = true;
      }
      work_(*question, stop, [&](Answer answer) {
        {
          const std::lock_guard lock(mutex_);
          if (asked_ || stop.stop_requested()) return;
          answer_ = std::move(answer);
        }
        done_();
      });
      {
        const std::lock_guard lock(mutex_);
        busy_ = false;
      }
      done_();
    }
  }

  Work work_;
  std::function<void()> done_;
  mutable std::mutex mutex_;
  std::condition_variable wake_;
  std::optional<Question> asked_;
  std::optional<Answer> answer_;
  std::stop_source stop_current_;
  bool busy_ = false;
  std::jthread thread_;  // last: it starts when all the others are there, and ends before they go
};

}  // namespace bathwright::desktop
