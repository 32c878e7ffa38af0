#include "isotally/error.hpp"

#include <gtest/gtest.h>

#include <stdexcept>
#include <string>
#include <variant>

namespace isotally {
namespace {

TEST(Error, CarriesKindPlaceAndMessage) {
    try {
        throw Error(ErrorKind::input, "SMILES character 5", "this bracket is never closed");
    } catch (const std::runtime_error& caught) {
        const auto* error = dynamic_cast<const Error*>(&caught);
        ASSERT_NE(error, nullptr);
        EXPECT_EQ(error->kind, ErrorKind::input);
        EXPECT_EQ(error->where, "SMILES character 5");
        EXPECT_STREQ(error->what(), "this bracket is never closed");
    }
}

TEST(Error, RefusalIsAValueThatIsFound) {
    const Answer<int> answered = 7;
    EXPECT_EQ(refusal(answered), nullptr);
    EXPECT_EQ(std::get<int>(answered), 7);

    const Answer<int> refused = Refusal{"molecule", "no benzene ring in it"};
    ASSERT_NE(refusal(refused), nullptr);
    EXPECT_EQ(refusal(refused)->where, "molecule");
    EXPECT_EQ(refusal(refused)->reason, "no benzene ring in it");
    EXPECT_THROW(std::get<int>(refused), std::bad_variant_access);
}

}  // namespace
}  // namespace isotally
