// SPDX-License-Identifier: Apache-2.0
#include "formats/heading_label.hpp"

#include <gtest/gtest.h>

#include "formats/refusal.hpp"

namespace bandwright {
namespace {

TEST(HeadingLabel, KnowsTheUnitsOfTheTradeHoweverTheyAreWritten) {
  for (const char* label : {"wavenumber [cm-1]", "cm-1", "Wavenumber (cm^-1)", "1/cm", "cm\u207B\u00B9",
                            "nu;cm\u22121", "WAVENUMBERS", "wavenumber_cm-1"})
    EXPECT_EQ(read_heading_label(label).unit, AxisUnit::Wavenumber) << label;
  for (const char* label : {"nm", "Wavelength (nm)", "wavelength/[nm]", "Nanometers"})
    EXPECT_EQ(read_heading_label(label).unit, AxisUnit::Nanometre) << label;
  for (const char* label : {"", "sample", "wavelength", "names", "cm", "x"})
    EXPECT_EQ(read_heading_label(label).unit, std::nullopt) << label;
}

TEST(HeadingLabel, KnowsTheOrdinates) {
  EXPECT_EQ(read_heading_label("sample, Absorbance").ordinate, Ordinate::Absorbance);
  EXPECT_EQ(read_heading_label("transmittance").ordinate, Ordinate::Transmittance);
  EXPECT_EQ(read_heading_label("%T").ordinate, Ordinate::PercentTransmittance);
  EXPECT_EQ(read_heading_label("% transmittance").ordinate, Ordinate::PercentTransmittance);
  EXPECT_EQ(read_heading_label("percent-transmittance").ordinate, Ordinate::PercentTransmittance);
  EXPECT_EQ(read_heading_label("reflectance [nm]").ordinate, Ordinate::Reflectance);
  EXPECT_EQ(read_heading_label("% reflectance").ordinate, std::nullopt);
  EXPECT_EQ(read_heading_label("t").ordinate, std::nullopt);
}

TEST(HeadingLabel, OnlyItsOwnWordsHeadSpectrumIds) {
  EXPECT_TRUE(read_heading_label("spectrum id [nm]").heads_spectrum_ids);
  EXPECT_FALSE(read_heading_label("spectrum").heads_spectrum_ids);
  EXPECT_FALSE(read_heading_label("sample id").heads_spectrum_ids);
}

TEST(HeadingLabel, RefusesContradictionsAndUnitsThatAreNotRead) {
  EXPECT_EQ(refusal([] { static_cast<void>(read_heading_label("wavenumber [nm]")); }),
            "the label \"wavenumber [nm]\" names two axis units");
  EXPECT_EQ(refusal([] { static_cast<void>(read_heading_label("absorbance, reflectance")); }),
            "the label \"absorbance, reflectance\" names two ordinates");
  EXPECT_EQ(refusal([] { static_cast<void>(read_heading_label("wavelength [\u00B5m]")); }),
            "the label \"wavelength [\u00B5m]\" names an axis unit other than cm-1 and nm (convert the axis "
            "to cm-1 or nm)");
}

TEST(HeadingLabel, WhatIsWrittenReadsBack) {
  for (const auto& unit :
       {std::optional<AxisUnit>{}, std::optional(AxisUnit::Wavenumber), std::optional(AxisUnit::Nanometre)}) {
    EXPECT_EQ(read_heading_label(heading_label_text(unit, {})).ordinate, std::nullopt);
    for (const auto& [ordinate, text] : EnumTexts<Ordinate>::entries) {
      const HeadingLabel label = read_heading_label(heading_label_text(unit, ordinate));
      EXPECT_EQ(label.unit, unit) << text;
      EXPECT_EQ(label.ordinate, ordinate) << text;
      EXPECT_TRUE(label.heads_spectrum_ids);
    }
  }
}

}  // namespace
}  // namespace bandwright
