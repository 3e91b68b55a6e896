// SPDX-License-Identifier: MIT
#include "montecarlo/program/signals.hpp"

#include <fcntl.h>
#include <unistd.h>

namespace headband::program {
namespace {

// What a signal handler may touch: lock-free atomics only. The one piece of global state of the program.
std::atomic<bool> gentle{false};
std::atomic<bool> asked{false};
std::atomic<int> noted{0};
static_assert(std::atomic<bool>::is_always_lock_free && std::atomic<int>::is_always_lock_free);

void on_signal(int signal) {
  if (gentle.load() && noted.load() == 0) {
    noted.store(signal);
    asked.store(true);
    return;
  }
  ::_exit(128 + signal);
}

void handle(int signal, void (*handler)(int)) {
  struct sigaction action{};
  action.sa_handler = handler;
  sigemptyset(&action.sa_mask);
  ::sigaction(signal, &action, nullptr);
}

}  // namespace

void prepare_process() {
  // A result file must never be opened as descriptor 0, 1 or 2: text printed later would land in it.
  for (int descriptor = 0; descriptor <= 2; ++descriptor) {
    if (::fcntl(descriptor, F_GETFD) == -1) {
      const int opened = ::open("/dev/null", O_RDWR);
      if (opened != descriptor && opened >= 0) {
        ::dup2(opened, descriptor);
        ::close(opened);
      }
    }
  }
  handle(SIGPIPE, SIG_IGN);
  handle(SIGXFSZ, SIG_IGN);
  handle(SIGINT, on_signal);
  handle(SIGTERM, on_signal);
}

void stop_gently(bool gently) { gentle.store(gently); }

const std::atomic<bool>& stop_asked() { return asked; }

int signal_noted() { return noted.load(); }

HoldSignals::HoldSignals() {
  sigset_t held;
  sigemptyset(&held);
  sigaddset(&held, SIGINT);
  sigaddset(&held, SIGTERM);
  ::pthread_sigmask(SIG_BLOCK, &held, &before_);
}

HoldSignals::~HoldSignals() { ::pthread_sigmask(SIG_SETMASK, &before_, nullptr); }

}  // namespace headband::program
