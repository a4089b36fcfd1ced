#include "cluster/nearest.h"

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

struct Best {
    V distance;
    VI label;
};

HWY_INLINE void keep_nearer(Best& best, V distance, int k) {
    const auto nearer = hn::Lt(distance, best.distance);
    best.distance = hn::Min(distance, best.distance);
    best.label = hn::IfThenElse(hn::RebindMask(DI(), nearer), hn::Set(DI(), k), best.label);
}

// Two vectors of points at once in three dimensions: the centre is loaded once for both.
HWY_INLINE void nearest_3d(const float* const* plane, std::size_t i, const Centres& centres,
                           Best& one, Best& two) {
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
        keep_nearer(one, hn::Add(hn::Add(hn::Mul(dx1, dx1), hn::Mul(dy1, dy1)), hn::Mul(dz1, dz1)),
                    k);
        keep_nearer(two, hn::Add(hn::Add(hn::Mul(dx2, dx2), hn::Mul(dy2, dy2)), hn::Mul(dz2, dz2)),
                    k);
    }
}

HWY_INLINE Best nearest_any(const PointPlanes& points, std::size_t i, const Centres& centres,
                            Best best) {
    const D d;
    for (int k = 0; k < centres.count; ++k) {
        const float* centre = centres.row(k);
        V sum = hn::Zero(d);
        for (int dim = 0; dim < points.dims; ++dim) {
            const V delta = hn::Sub(hn::LoadU(d, points.plane[dim] + i), hn::Set(d, centre[dim]));
            sum = hn::Add(sum, hn::Mul(delta, delta));
        }
        keep_nearer(best, sum, k);
    }
    return best;
}

HWY_INLINE void store(const Best& best, std::size_t i, std::uint16_t* label, float* distance) {
    const hn::Rebind<std::uint16_t, DI> d16;
    hn::StoreU(best.distance, D(), distance + i);
    hn::StoreU(hn::DemoteTo(d16, best.label), d16, label + i);
}

// The few points behind the last whole vector; the same sums in the same order.
void nearest_tail(const PointPlanes& points, std::size_t i, const Centres& centres,
                  std::uint16_t* label, float* distance) {
    for (; i < points.n; ++i) {
        float best = 3.0e38F;
        int best_k = 0;
        for (int k = 0; k < centres.count; ++k) {
            float sum = 0;
            for (int dim = 0; dim < points.dims; ++dim) {
                const float delta = points.plane[dim][i] - centres.row(k)[dim];
                sum += delta * delta;
            }
            if (sum < best) {
                best = sum;
                best_k = k;
            }
        }
        distance[i] = best;
        label[i] = static_cast<std::uint16_t>(best_k);
    }
}

void NearestCentres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                    float* distance) {
    const D d;
    const std::size_t lanes = hn::Lanes(d);
    const Best none = {hn::Set(d, 3.0e38F), hn::Zero(DI())};
    std::size_t i = 0;
    if (points.dims == 3) {
        for (; i + 2 * lanes <= points.n; i += 2 * lanes) {
            Best one = none;
            Best two = none;
            nearest_3d(points.plane, i, centres, one, two);
            store(one, i, label, distance);
            store(two, i + lanes, label, distance);
        }
    } else {
        for (; i + lanes <= points.n; i += lanes) {
            store(nearest_any(points, i, centres, none), i, label, distance);
        }
    }
    nearest_tail(points, i, centres, label, distance);
}

}  // namespace HWY_NAMESPACE
}  // namespace tincture
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace tincture {
HWY_EXPORT(NearestCentres);

void nearest_centres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                     float* squared_distance) {
    HWY_DYNAMIC_DISPATCH(NearestCentres)(points, centres, label, squared_distance);
}
}  // namespace tincture
#endif
