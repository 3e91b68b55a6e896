// SPDX-License-Identifier: MIT
//
// Files that are cut, flipped or made up by somebody who means harm: refused as damaged, before memory is taken.
#include "core/resultfile/reader.hpp"
#include "core/resultfile/result_file.hpp"

#include "core/base/error.hpp"
#include "core/show/show.hpp"
#include "tests/support/sample_study.hpp"
#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <array>
#include <csignal>
#include <cstdint>
#include <fstream>
#include <functional>
#include <string>
#include <vector>

namespace headband::resultfile {
namespace {

using support::bytes_of;
using support::ScratchFolder;

/// A whole sample file in `folder`.
std::string sample_file(const ScratchFolder& folder) {
  const std::string path = folder / "sample.h5";
  write(support::sample_study(), path, {.replace = true});
  return path;
}

/// What reading `path` throws; empty when it does not.
std::string refusal(const std::string& path) {
  try {
    static_cast<void>(read(path));
  } catch (const base::IoError& e) {
    EXPECT_EQ(e.failure(), base::IoFailure::damaged) << e.what();
    return e.what();
  }
  return {};
}

/// Opens a sample file for writing, lets `change` spoil it, and returns what reading then says.
std::string refusal_after(const std::function<void(H5::H5File&)>& change) {
  const ScratchFolder folder;
  const std::string path = sample_file(folder);
  H5::H5File file(path, H5F_ACC_RDWR);
  change(file);
  file.close();
  return refusal(path);
}

void replace_numbers(H5::H5File& file,
                     const std::string& path,
                     const std::vector<hsize_t>& dims,
                     const H5::PredType& type) {
  file.unlink(path);
  const H5::DataSpace space(static_cast<int>(dims.size()), dims.data());
  file.createDataSet(path, type, space).close();
}

void set_attribute(H5::H5File& file, const std::string& name, const std::string& text) {
  H5::Group root = file.openGroup("/");
  root.removeAttr(name);
  const H5::StrType type(H5::PredType::C_S1, text.size());
  root.createAttribute(name, type, H5::DataSpace(H5S_SCALAR)).write(type, text);
}

TEST(DamagedFile, MissingPartsAreNamed) {
  EXPECT_NE(refusal_after([](H5::H5File& f) { f.unlink("/steady"); }).find("/steady: is missing"), std::string::npos);
  EXPECT_NE(refusal_after([](H5::H5File& f) { f.unlink("/steady/flow"); }).find("/steady/flow: is missing"),
            std::string::npos);
  EXPECT_NE(refusal_after([](H5::H5File& f) { f.unlink("/budget"); }).find("/budget: is missing"), std::string::npos);
}

TEST(DamagedFile, SizesAreCheckedBeforeMemoryIsTaken) {
  // 8 TB that were never written: the file stays small.
  const std::string huge = refusal_after(
      [](H5::H5File& f) { replace_numbers(f, "/transient/time", {1'000'000'000'000}, H5::PredType::IEEE_F64LE); });
  EXPECT_NE(huge.find("claims more data than the file holds"), std::string::npos) << huge;
  const std::string overflow = refusal_after([](H5::H5File& f) {
    replace_numbers(
        f, "/transient/probe_head", {std::uint64_t{1} << 33U, std::uint64_t{1} << 33U}, H5::PredType::IEEE_F64LE);
  });
  EXPECT_NE(overflow.find("another length"), std::string::npos) << overflow;
}

TEST(DamagedFile, LengthsMustAgreeWithTheirDimensions) {
  const std::string shorter =
      refusal_after([](H5::H5File& f) { replace_numbers(f, "/steady/flow", {1}, H5::PredType::IEEE_F64LE); });
  EXPECT_NE(shorter.find("/steady/flow: has another length"), std::string::npos) << shorter;
  const std::string rank =
      refusal_after([](H5::H5File& f) { replace_numbers(f, "/steady/flow", {2, 1}, H5::PredType::IEEE_F64LE); });
  EXPECT_NE(rank.find("another number of dimensions"), std::string::npos) << rank;
  const std::string places = refusal_after([](H5::H5File& f) {
    f.unlink("/extremes/places/place");
    const hsize_t two = 2;
    const std::array<std::int32_t, 2> index = {0, 1};
    f.createDataSet("/extremes/places/place", H5::PredType::STD_I32LE, H5::DataSpace(1, &two))
        .write(index.data(), H5::PredType::NATIVE_INT32);
  });
  EXPECT_NE(places.find("/extremes/places/place"), std::string::npos) << places;
}

TEST(DamagedFile, KindsOfDataMustBeTheRightOnes) {
  const std::string whole =
      refusal_after([](H5::H5File& f) { replace_numbers(f, "/steady/flow", {2}, H5::PredType::STD_I32LE); });
  EXPECT_NE(whole.find("another kind of data"), std::string::npos) << whole;
  const std::string number =
      refusal_after([](H5::H5File& f) { replace_numbers(f, "/steady/pipe_name", {2}, H5::PredType::IEEE_F64LE); });
  EXPECT_NE(number.find("another kind of data"), std::string::npos) << number;
  const std::string group = refusal_after([](H5::H5File& f) {
    f.unlink("/steady/flow");
    f.createGroup("/steady/flow").close();
  });
  EXPECT_FALSE(group.empty());
}

TEST(DamagedFile, CodesAndIndicesAreChecked) {
  const auto with_code = [](const char* path, std::int8_t code) {
    return refusal_after([&](H5::H5File& f) { f.openDataSet(path).write(&code, H5::PredType::NATIVE_INT8); });
  };
  EXPECT_NE(with_code("/summary/verdict", 9).find("unknown code"), std::string::npos);
  EXPECT_NE(with_code("/summary/values_shown", -1).find("unknown code"), std::string::npos);
  const auto with_index = [](const char* path, std::size_t count) {
    return refusal_after([&](H5::H5File& f) {
      const std::vector<std::int32_t> index(count, 1'000'000);
      f.openDataSet(path).write(index.data(), H5::PredType::NATIVE_INT32);
    });
  };
  const auto study = support::sample_study();
  EXPECT_NE(with_index("/transient/station_pipe", study.transient->station_pipe.size()).find("station_pipe"),
            std::string::npos);
  EXPECT_NE(with_index("/bands/profile_station_pipe", study.bands->profile_station_pipe.size()).find("station_pipe"),
            std::string::npos);
  EXPECT_FALSE(with_index("/steady/profile_pipe", 10).empty());
  EXPECT_FALSE(with_index("/devices/number_device", 6).empty());
  EXPECT_FALSE(with_index("/bands/sensitivity_output", 2).empty());
  EXPECT_FALSE(with_index("/events/event", study.events.size()).empty());
}

TEST(DamagedFile, NumbersThatDoNotFitAreRefused) {
  const std::string text = refusal_after([](H5::H5File& f) {
    const std::vector<std::int64_t> modes(3, std::int64_t{1} << 40U);
    f.openDataSet("/bands/output_modes").write(modes.data(), H5::PredType::NATIVE_INT64);
  });
  EXPECT_NE(text.find("out of range"), std::string::npos) << text;
}

TEST(DamagedFile, NothingLeadsOutOfTheFile) {
  const std::string soft = refusal_after([](H5::H5File& f) {
    f.unlink("/steady/flow");
    H5Lcreate_soft("/steady/velocity", f.getId(), "/steady/flow", H5P_DEFAULT, H5P_DEFAULT);
  });
  EXPECT_NE(soft.find("link to somewhere else"), std::string::npos) << soft;
  const std::string external = refusal_after([](H5::H5File& f) {
    f.unlink("/provenance");
    H5Lcreate_external("other.h5", "/provenance", f.getId(), "/provenance", H5P_DEFAULT, H5P_DEFAULT);
  });
  EXPECT_NE(external.find("link to somewhere else"), std::string::npos) << external;
  const std::string stored_outside = refusal_after([](H5::H5File& f) {
    f.unlink("/steady/flow");
    H5::DSetCreatPropList properties;
    properties.setExternal("/etc/passwd", 0, 16);
    const hsize_t two = 2;
    f.createDataSet("/steady/flow", H5::PredType::IEEE_F64LE, H5::DataSpace(1, &two), properties).close();
  });
  EXPECT_NE(stored_outside.find("lies in another file"), std::string::npos) << stored_outside;
}

TEST(DamagedFile, OtherFormatsAreRefusedInWords) {
  EXPECT_NE(refusal_after([](H5::H5File& f) { set_attribute(f, "schema", "something"); }).find("no result of headband"),
            std::string::npos);
  EXPECT_NE(refusal_after([](H5::H5File& f) { set_attribute(f, "schema_version", "2.0"); }).find("format 2.0"),
            std::string::npos);
  EXPECT_EQ(refusal_after([](H5::H5File& f) { set_attribute(f, "schema_version", "1.9"); }), "")
      << "a newer minor version only adds";
  EXPECT_NE(refusal_after([](H5::H5File& f) { f.openGroup("/").removeAttr("state"); }).find("how the run ended"),
            std::string::npos);
}

/// How reading ended in a process of its own, as the program reads: refused, read to the end, or taken down by the
/// library (which the program turns into "damaged").
enum class Ending { refused, same_json, other_json, killed, wrong };

Ending read_apart(const std::string& path, const std::string& json) {
  const pid_t child = ::fork();
  if (child == 0) {
    const rlimit cpu = {2, 2};
    ::setrlimit(RLIMIT_CPU, &cpu);
    const rlimit none = {0, 0};
    ::setrlimit(RLIMIT_CORE, &none);
    try {
      ::_exit(show::json(read(path)) == json ? 1 : 2);
    } catch (const base::IoError& e) {
      ::_exit(e.failure() == base::IoFailure::damaged ? 0 : 3);
    } catch (...) {
      ::_exit(3);
    }
  }
  int status = 0;
  ::waitpid(child, &status, 0);
  if (!WIFEXITED(status)) return Ending::killed;
  switch (WEXITSTATUS(status)) {
    case 0:
      return Ending::refused;
    case 1:
      return Ending::same_json;
    case 2:
      return Ending::other_json;
    default:
      return Ending::wrong;
  }
}

TEST(DamagedFile, EveryCutIsRefused) {
  const ScratchFolder folder;
  const std::string whole = bytes_of(sample_file(folder));
  const std::string json = show::json(support::sample_study());
  constexpr std::size_t cuts = 120;
  for (std::size_t i = 0; i < cuts; ++i) {
    const std::size_t length = whole.size() * i / cuts;
    const std::string path = folder / "cut.h5";
    std::ofstream(path, std::ios::binary | std::ios::trunc).write(whole.data(), static_cast<std::streamsize>(length));
    EXPECT_EQ(read_apart(path, json), Ending::refused) << length;
  }
}

/// `flips` copies of `whole`, each with one bit the other way, read apart: how many ended how.
std::array<int, 5> endings_of_flips(const std::string& whole, int flips) {
  const ScratchFolder folder;
  const std::string json = show::json(support::sample_study());
  std::uint64_t state = 7;
  const auto next = [&] { return state = state * 6364136223846793005ULL + 1442695040888963407ULL; };
  std::array<int, 5> count{};
  for (int i = 0; i < flips; ++i) {
    std::string spoiled = whole;
    const std::size_t at = (next() >> 20U) % spoiled.size();
    spoiled[at] = static_cast<char>(static_cast<unsigned char>(spoiled[at]) ^ (1U << ((next() >> 40U) % 8)));
    const std::string path = folder / "flipped.h5";
    std::ofstream(path, std::ios::binary | std::ios::trunc)
        .write(spoiled.data(), static_cast<std::streamsize>(spoiled.size()));
    ++count[static_cast<std::size_t>(read_apart(path, json))];
  }
  return count;
}

TEST(DamagedFile, EveryFlippedBitIsSeen) {
  const ScratchFolder folder;
  const auto count = endings_of_flips(bytes_of(sample_file(folder)), 200);
  EXPECT_EQ(count[static_cast<std::size_t>(Ending::refused)] + count[static_cast<std::size_t>(Ending::same_json)], 200);
  // Only a flip inside the seal itself, one byte in two thousand, leaves a file that reads as before.
  EXPECT_LE(count[static_cast<std::size_t>(Ending::same_json)], 2);
}

TEST(DamagedFile, WithoutASealFlippedBitsEndInAnswerOrRefusal) {
  const ScratchFolder folder;
  std::string whole = bytes_of(sample_file(folder));
  whole.resize(whole.rfind("\nheadband seal"));
  const auto count = endings_of_flips(whole, 200);
  EXPECT_EQ(count[static_cast<std::size_t>(Ending::wrong)], 0);
  EXPECT_LE(count[static_cast<std::size_t>(Ending::killed)], 4);
  EXPECT_GT(count[static_cast<std::size_t>(Ending::refused)], 0);
}

TEST(DamagedFile, AFileChangedThroughHdf5IsReadWithoutItsSeal) {
  EXPECT_EQ(refusal_after([](H5::H5File& f) { f.createGroup("/mine").close(); }), "");
}

}  // namespace
}  // namespace headband::resultfile
