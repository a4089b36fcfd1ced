#include "cluster/nearest.h"

#include <algorithm>
#include <array>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "cluster/nearest.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace tincture {
namespace HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

using D = hn::ScalableTag<float>;
using DI = hn::RebindToSigned<D>;
using V = hn::Vec<D>;
using VI = hn::Vec<DI>;

constexpr float far_away = 3.0e38F;

template <bool two>
struct Best {
    V distance;
    V second;
    VI label;

    HWY_INLINE void keep_nearer(V other, int k) {
        if constexpr (two) second = hn::Min(second, hn::Max(distance, other));
        const auto nearer = hn::Lt(other, distance);
        distance = hn::Min(other, distance);
        label = hn::IfThenElse(hn::RebindMask(DI(), nearer), hn::Set(DI(), k), label);
    }
};

template <bool two>
HWY_INLINE Best<two> none_yet() {
    return {hn::Set(D(), far_away), hn::Set(D(), far_away), hn::Zero(DI())};
}

// Two vectors of points at once in three dimensions: the centre is loaded once for both.
template <bool two>
HWY_INLINE void nearest_3d(const float* const* plane, std::size_t i, const Centres& centres,
                           Best<two>& first_best, Best<two>& second_best) {
    const D d;
    const std::size_t lanes = hn::Lanes(d);
    const V x1 = hn::LoadU(d, plane[0] + i);
    const V y1 = hn::LoadU(d, plane[1] + i);
    const V z1 = hn::LoadU(d, plane[2] + i);
    const V x2 = hn::LoadU(d, plane[0] + i + lanes);
    const V y2 = hn::LoadU(d, plane[1] + i + lanes);
    const V z2 = hn::LoadU(d, plane[2] + i + lanes);
    const float* centre = centres.x.data();
    for (int k = 0; k < centres.count; ++k, centre += 3) {
        const V cx = hn::Set(d, centre[0]);
        const V cy = hn::Set(d, centre[1]);
        const V cz = hn::Set(d, centre[2]);
        const V dx1 = hn::Sub(x1, cx);
        const V dx2 = hn::Sub(x2, cx);
        const V dy1 = hn::Sub(y1, cy);
        const V dy2 = hn::Sub(y2, cy);
        const V dz1 = hn::Sub(z1, cz);
        const V dz2 = hn::Sub(z2, cz);
        first_best.keep_nearer(
            hn::Add(hn::Add(hn::Mul(dx1, dx1), hn::Mul(dy1, dy1)), hn::Mul(dz1, dz1)), k);
        second_best.keep_nearer(
            hn::Add(hn::Add(hn::Mul(dx2, dx2), hn::Mul(dy2, dy2)), hn::Mul(dz2, dz2)), k);
    }
}

template <bool two>
HWY_INLINE void nearest_any(const PointPlanes& points, std::size_t i, const Centres& centres,
                            Best<two>& best) {
    const D d;
    for (int k = 0; k < centres.count; ++k) {
        const float* centre = centres.row(k);
        V sum = hn::Zero(d);
        for (int dim = 0; dim < points.dims; ++dim) {
            const V delta = hn::Sub(hn::LoadU(d, points.plane[dim] + i), hn::Set(d, centre[dim]));
            sum = hn::Add(sum, hn::Mul(delta, delta));
        }
        best.keep_nearer(sum, k);
    }
}

// Where results go; `second` is null unless two are wanted.
struct Out {
    std::uint16_t* label;
    float* distance;
    float* second;
};

template <bool two>
HWY_INLINE void store(const Best<two>& best, std::size_t i, const Out& out) {
    const hn::Rebind<std::uint16_t, DI> d16;
    hn::StoreU(best.distance, D(), out.distance + i);
    if constexpr (two) hn::StoreU(best.second, D(), out.second + i);
    hn::StoreU(hn::DemoteTo(d16, best.label), d16, out.label + i);
}

// Fewer points than vectors take; the same sums in the same order.
void nearest_few(const PointPlanes& points, const Centres& centres, const Out& out) {
    for (std::size_t i = 0; i < points.n; ++i) {
        float best = far_away;
        float second = far_away;
        int best_k = 0;
        for (int k = 0; k < centres.count; ++k) {
            float sum = 0;
            for (int dim = 0; dim < points.dims; ++dim) {
                const float delta = points.plane[dim][i] - centres.row(k)[dim];
                sum += delta * delta;
            }
            second = std::min(second, std::max(best, sum));
            if (sum < best) {
                best = sum;
                best_k = k;
            }
        }
        out.distance[i] = best;
        if (out.second != nullptr) out.second[i] = second;
        out.label[i] = static_cast<std::uint16_t>(best_k);
    }
}

template <bool two>
void find_nearest(const PointPlanes& points, const Centres& centres, const Out& out) {
    const std::size_t lanes = hn::Lanes(D());
    const std::size_t step = points.dims == 3 ? 2 * lanes : lanes;
    if (points.n < step) return nearest_few(points, centres, out);
    for (std::size_t start = 0; start < points.n; start += step) {
        // The last step goes back over points that are done, to end where they end.
        const std::size_t i = std::min(start, points.n - step);
        Best<two> best = none_yet<two>();
        if (points.dims == 3) {
            Best<two> next = none_yet<two>();
            nearest_3d(points.plane, i, centres, best, next);
            store(next, i + lanes, out);
        } else {
            nearest_any(points, i, centres, best);
        }
        store(best, i, out);
    }
}

void NearestCentres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                    float* distance) {
    find_nearest<false>(points, centres, {label, distance, nullptr});
}

void NearestTwoCentres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                       float* distance, float* second) {
    find_nearest<true>(points, centres, {label, distance, second});
}

}  // namespace HWY_NAMESPACE
}  // namespace tincture
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace tincture {
HWY_EXPORT(NearestCentres);
HWY_EXPORT(NearestTwoCentres);

void nearest_centres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                     float* squared_distance) {
    HWY_DYNAMIC_DISPATCH(NearestCentres)(points, centres, label, squared_distance);
}

void nearest_two_centres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                         float* squared_distance, float* second_squared_distance) {
    HWY_DYNAMIC_DISPATCH(NearestTwoCentres)
    (points, centres, label, squared_distance, second_squared_distance);
}

void nearest_centres(const WeightedPoints& points, std::size_t start, std::size_t size,
                     const Centres& centres, std::uint16_t* label, float* squared_distance) {
    std::array<const float*, max_dims> plane{};
    for (int d = 0; d < points.dims; ++d) {
        plane[static_cast<std::size_t>(d)] = points.plane(d) + start;
    }
    nearest_centres({plane.data(), points.dims, size}, centres, label, squared_distance);
}

}  // namespace tincture
#endif
