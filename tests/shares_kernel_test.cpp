// The inner loop of the intervals for every instruction set this processor has, against the formula written
// out with the standard library, and one against the other.
#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>
#include <random>

#include "isotally/shares.hpp"
#include "shares/draw_kernel.hpp"

namespace isotally::shares {
namespace {

constexpr double nine_digits = 1e-9;

struct Drawn {
    std::vector<std::vector<double>> percent;
    std::vector<double> rate;
};

struct Question {
    std::size_t sites, count;
    std::vector<double> ln_factor, root;
    std::vector<std::vector<double>> model, laboratory;
    double points = 1.2, relative = 0.07, most = 0.7;
};

Question question(std::size_t sites, std::size_t count) {
    std::mt19937_64 random(sites * 7919 + count);
    std::normal_distribution<double> normal;
    Question q{sites, count, {}, std::vector<double>(sites * sites, 0), {}, {}};
    for (std::size_t i = 0; i < sites; ++i) {
        q.ln_factor.push_back(4 * normal(random) - 3);
        for (std::size_t j = 0; j <= i; ++j)
            q.root[i * sites + j] = normal(random);
        for (auto* table : {&q.model, &q.laboratory}) {
            table->emplace_back();
            for (std::size_t d = 0; d < count; ++d)
                table->back().push_back(normal(random));
        }
    }
    return q;
}

Drawn run(const DrawKernel& kernel, const Question& q) {
    Drawn drawn{std::vector<std::vector<double>>(q.sites, std::vector<double>(q.count)),
                std::vector<double>(q.count)};
    std::vector<const double*> model, laboratory;
    std::vector<double*> percent;
    for (std::size_t i = 0; i < q.sites; ++i) {
        model.push_back(q.model[i].data());
        laboratory.push_back(q.laboratory[i].data());
        percent.push_back(drawn.percent[i].data());
    }
    kernel.run({q.sites, q.count, q.ln_factor.data(), q.root.data(), model.data(), laboratory.data(),
                q.points, q.relative, q.most, percent.data(), drawn.rate.data()});
    return drawn;
}

Drawn written_out(const Question& q) {
    Drawn drawn{std::vector<std::vector<double>>(q.sites, std::vector<double>(q.count)),
                std::vector<double>(q.count)};
    for (std::size_t d = 0; d < q.count; ++d) {
        double total = 0, seen = 0;
        for (std::size_t i = 0; i < q.sites; ++i) {
            double ln = q.ln_factor[i];
            for (std::size_t j = 0; j <= i; ++j)
                ln += q.root[i * q.sites + j] * q.model[j][d];
            total += drawn.percent[i][d] = std::exp(ln);
        }
        drawn.rate[d] = total / 6;
        for (std::size_t i = 0; i < q.sites; ++i) {
            auto& p = drawn.percent[i][d];
            p *= 100 / total;
            p *= std::exp(std::min(q.most, std::hypot(q.points / p, q.relative)) * q.laboratory[i][d]);
            seen += p;
        }
        for (std::size_t i = 0; i < q.sites; ++i)
            drawn.percent[i][d] *= 100 / seen;
    }
    return drawn;
}

void expect_same(const Drawn& found, const Drawn& wanted, const std::string& what) {
    for (std::size_t d = 0; d < wanted.rate.size(); ++d) {
        ASSERT_NEAR(found.rate[d], wanted.rate[d], nine_digits * wanted.rate[d]) << what << ", draw " << d;
        double sum = 0;
        for (std::size_t i = 0; i < wanted.percent.size(); ++i) {
            ASSERT_NEAR(found.percent[i][d], wanted.percent[i][d], nine_digits * wanted.percent[i][d])
                << what << ", site " << i << ", draw " << d;
            sum += found.percent[i][d];
        }
        ASSERT_NEAR(sum, 100, 1e-10) << what;
    }
}

TEST(DrawKernel, EveryInstructionSetAgreesWithTheFormula) {
    const auto kernels = draw_kernels();
    ASSERT_FALSE(kernels.empty());
    EXPECT_STREQ(kernels.back().instructions, "baseline");
    for (const auto& kernel : kernels)
        for (const std::size_t sites : {1u, 2u, 3u, 5u, 12u})
            for (const std::size_t count : {1u, 7u, 256u, 1000u, 1001u}) {
                const auto q = question(sites, count);
                expect_same(run(kernel, q), written_out(q), kernel.instructions);
            }
}

TEST(DrawKernel, WhereTheTablesLieInMemoryMakesNoDifference) {
    const auto q = question(3, 1000);
    for (const auto& kernel : draw_kernels()) {
        const auto usual = run(kernel, q);
        for (std::size_t shift = 1; shift < 8; ++shift) {
            std::vector<std::vector<double>> rooms;
            std::vector<const double*> model, laboratory;
            Drawn out{std::vector<std::vector<double>>(3, std::vector<double>(1000 + shift)),
                      std::vector<double>(1000 + shift)};
            std::vector<double*> percent;
            rooms.reserve(6);
            for (std::size_t i = 0; i < 3; ++i) {
                for (const auto* table : {&q.model[i], &q.laboratory[i]}) {
                    rooms.emplace_back(shift, 0.0);
                    rooms.back().insert(rooms.back().end(), table->begin(), table->end());
                }
                model.push_back(rooms[2 * i].data() + shift);
                laboratory.push_back(rooms[2 * i + 1].data() + shift);
                percent.push_back(out.percent[i].data() + shift);
            }
            kernel.run({3, 1000, q.ln_factor.data(), q.root.data(), model.data(), laboratory.data(), q.points,
                        q.relative, q.most, percent.data(), out.rate.data() + shift});
            for (std::size_t d = 0; d < 1000; ++d) {
                ASSERT_EQ(out.rate[d + shift], usual.rate[d]) << kernel.instructions << " " << shift;
                for (std::size_t i = 0; i < 3; ++i)
                    ASSERT_EQ(out.percent[i][d + shift], usual.percent[i][d]) << kernel.instructions;
            }
        }
    }
}

}  // namespace
}  // namespace isotally::shares
