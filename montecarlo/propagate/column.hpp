#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <cstdlib>
#include <new>
#include <type_traits>
#include <utility>
#include <vector>
#if defined(__linux__)
#include <sys/mman.h>
#endif

namespace headband::montecarlo {

/// Storage of long columns: what `resize` adds is left as it is (every draw writes its own number), and from 4 MB on
/// the memory is asked for in large pages, which a million first touches of small ones would cost more than the draws.
template <class T>
struct ColumnStorage {
  static_assert(std::is_trivially_copyable_v<T>);
  using value_type = T;  // NOLINT(readability-identifier-naming): what the standard library asks for
  static constexpr std::size_t large_page = std::size_t{2} << 20;
  static constexpr std::size_t worth_large_pages = 2 * large_page;

  ColumnStorage() = default;
  template <class U>
  ColumnStorage(const ColumnStorage<U>&) {}  // NOLINT(google-explicit-constructor)

  [[nodiscard]] T* allocate(std::size_t count) {
    if (count > static_cast<std::size_t>(-1) / sizeof(T) - large_page) throw std::bad_array_new_length();
    const std::size_t bytes = count * sizeof(T);
    const bool large = bytes >= worth_large_pages;
    const std::size_t boundary = large ? large_page : 64;
    void* memory = std::aligned_alloc(boundary, (bytes + boundary - 1) / boundary * boundary);
    if (memory == nullptr) throw std::bad_alloc();
#if defined(__linux__)
    if (large) madvise(memory, bytes / large_page * large_page, MADV_HUGEPAGE);  // a wish: nothing hangs on it
#endif
    return static_cast<T*>(memory);
  }
  void deallocate(T* memory, std::size_t) { std::free(memory); }

  template <class U>
  void construct(U* at) {
    ::new (static_cast<void*>(at)) U;
  }
  template <class U, class... A>
  void construct(U* at, A&&... from) {
    ::new (static_cast<void*>(at)) U(std::forward<A>(from)...);
  }
  friend bool operator==(const ColumnStorage&, const ColumnStorage&) { return true; }
};

/// One number per draw.
using Column = std::vector<double, ColumnStorage<double>>;

}  // namespace headband::montecarlo
