// What a record shows to react must be answered: every floor and every ban lies beyond it.
#include <gtest/gtest.h>

#include "../knowledge.hpp"

namespace isotally {
namespace {

TEST(Records, EveryRingThatARecordShowsReactingIsAnswered) {
    int asked = 0;
    for (const auto& record : tables().measurements) {
        if (record.use == "no")
            continue;
        SCOPED_TRACE(record.id + " " + record.substrate + " " + record.reaction);
        const auto ring = arene(record.substrate);
        const auto conditions =
            answered(choose_conditions(tables(), reaction(record.reaction), {}, {}), record.id);
        const auto answer = answer_step(knowledge(), model(reaction_row(record.reaction).family), ring,
                                        conditions, {.count = 10});
        EXPECT_EQ(refusal(answer), nullptr) << (refusal(answer) ? refusal(answer)->reason : "");
        ++asked;
    }
    EXPECT_GT(asked, 250);
}

}  // namespace
}  // namespace isotally
