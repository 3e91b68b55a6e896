// SPDX-License-Identifier: MIT
#include "core/resultfile/objects.hpp"

#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

namespace headband::resultfile {
namespace {

using Dims = std::vector<hsize_t>;

TEST(Objects, SmallDataLieInOnePieceLargeOnesInCheckedChunks) {
  EXPECT_FALSE(chunked({}, 8));
  EXPECT_FALSE(chunked({1000}, 8));
  EXPECT_TRUE(chunked({100000}, 8));
  EXPECT_TRUE(chunked({5000, 6}, 8));
}

TEST(Objects, ChunksServeARowAndAColumn) {
  EXPECT_EQ(chunk_of({100}, 8), (Dims{100}));
  EXPECT_EQ(chunk_of({1'000'000}, 8), (Dims{65536}));
  EXPECT_EQ(chunk_of({5000, 6}, 8), (Dims{5000, 6}));
  EXPECT_EQ(chunk_of({100'000, 6}, 8), (Dims{10922, 6}));
  EXPECT_EQ(chunk_of({100'000, 500}, 8), (Dims{1024, 64}));
  for (const Dims& dims : {Dims{100'000, 500}, Dims{7, 100'000}, Dims{100'000, 1}}) {
    const Dims chunk = chunk_of(dims, 8);
    EXPECT_LE(chunk[0] * chunk[1] * 8, 512U * 1024U);
    EXPECT_LE(chunk[0], dims[0]);
    EXPECT_LE(chunk[1], dims[1]);
  }
}

class ObjectsInAFile : public ::testing::Test {
 protected:
  support::ScratchFolder folder_;
  H5::H5File file_{folder_ / "a.h5", H5F_ACC_TRUNC};
};

TEST_F(ObjectsInAFile, NumbersNeverWrittenReadAsMissing) {
  H5::Group root = file_.openGroup("/");
  const std::vector<double> values(20000, 1.0);
  H5::DataSet dataset = write_numbers(root, "x", {20000}, values.data(), {"m", "Length"});
  H5::DSetCreatPropList properties = dataset.getCreatePlist();
  double fill = 0.0;
  properties.getFillValue(H5::PredType::NATIVE_DOUBLE, &fill);
  EXPECT_TRUE(std::isnan(fill));
  EXPECT_EQ(properties.getLayout(), H5D_CHUNKED);
  EXPECT_EQ(properties.getNfilters(), 1);  // the checksum
}

TEST_F(ObjectsInAFile, AttributesAreFixedLengthAndMayBeEmptyOrLong) {
  H5::Group root = file_.openGroup("/");
  write_attribute(root, "empty", "");
  EXPECT_EQ(root.openAttribute("empty").getSpace().getSimpleExtentType(), H5S_NULL);
  write_attribute(root, "title", "Süd");
  EXPECT_EQ(root.openAttribute("title").getStorageSize(), 4U);
  EXPECT_FALSE(root.openAttribute("title").getStrType().isVariableStr());
  // 59 999 single bytes and a character of two: the cut must not halve it.
  write_attribute(root, "long", std::string(59999, 'a') + "ü" + std::string(10000, 'b'));
  EXPECT_EQ(root.openAttribute("long").getStorageSize(), 59999U);
}

TEST_F(ObjectsInAFile, CodesNameTheirFlags) {
  H5::Group root = file_.openGroup("/");
  const std::int8_t code = 1;
  H5::DataSet dataset = write_numbers(root, "verdict", {}, &code, {.long_name = "Verdict"});
  write_flags(dataset, {0, 1}, "no yes");
  std::string meanings;
  const H5::Attribute attribute = dataset.openAttribute("flag_meanings");
  attribute.read(attribute.getStrType(), meanings);
  EXPECT_EQ(meanings, "no yes");
}

}  // namespace
}  // namespace headband::resultfile
