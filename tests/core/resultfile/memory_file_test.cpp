// SPDX-License-Identifier: MIT
#include "core/resultfile/memory_file.hpp"

#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>

#include <fstream>
#include <vector>

namespace headband::resultfile {
namespace {

TEST(MemoryFile, HoldsTheClosedFileAsTheDiskWould) {
  const support::ScratchFolder folder;
  std::vector<double> values(2'000'000);  // larger than one step of growth
  for (std::size_t i = 0; i < values.size(); ++i) values[i] = 0.25 * static_cast<double>(i);
  MemoryFile memory;
  {
    H5::FileAccPropList access = memory.access();
    H5Pset_libver_bounds(access.getId(), H5F_LIBVER_V18, H5F_LIBVER_V110);
    H5::H5File file("in memory", H5F_ACC_TRUNC, H5::FileCreatPropList::DEFAULT, access);
    const hsize_t count = values.size();
    H5::DataSet dataset = file.createDataSet("x", H5::PredType::IEEE_F64LE, H5::DataSpace(1, &count));
    dataset.write(values.data(), H5::PredType::NATIVE_DOUBLE);
    dataset.close();
    EXPECT_THROW(static_cast<void>(memory.bytes()), H5::Exception) << "still open";
    file.close();
  }
  const auto bytes = memory.bytes();
  std::ofstream(folder / "a.h5", std::ios::binary)
      .write(reinterpret_cast<const char*>(bytes.data()), static_cast<std::streamsize>(bytes.size()));
  H5::H5File file(folder / "a.h5", H5F_ACC_RDONLY);
  std::vector<double> back(values.size());
  file.openDataSet("x").read(back.data(), H5::PredType::NATIVE_DOUBLE);
  EXPECT_EQ(back, values);
}

TEST(MemoryFile, AFileThatNeverWasHasNoBytes) {
  const MemoryFile memory;
  EXPECT_THROW(static_cast<void>(memory.bytes()), H5::Exception);
}

}  // namespace
}  // namespace headband::resultfile
