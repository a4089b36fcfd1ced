#include "light_paths.h"

#include <limits>
#include <optional>

namespace tincture::samples {
namespace {

constexpr double nothing = std::numeric_limits<double>::infinity();
constexpr int longest_path = 6;

bool enter_box(const Ray& ray, Vec low, Vec high, double& from, double& to) {
    const auto cut = [&](double lo, double hi, double origin, double inverse) {
        double a = (lo - origin) * inverse;
        double b = (hi - origin) * inverse;
        if (a > b) std::swap(a, b);
        from = a > from ? a : from;
        to = b < to ? b : to;
    };
    cut(low.x, high.x, ray.origin.x, ray.inverse.x);
    cut(low.y, high.y, ray.origin.y, ray.inverse.y);
    cut(low.z, high.z, ray.origin.z, ray.inverse.z);
    return from < to;
}

double march(const Body& body, const Ray& ray, double from, double to) {
    double t = from;
    for (int step = 0; step < 160 && t < to; ++step) {
        const double d = body.distance(ray.at(t));
        if (d < 0.0015) return t;
        t += d;
    }
    return nothing;
}

struct Hit {
    double t = nothing;
    const Body* body = nullptr;  // none: the room
    Vec normal;
};

// The nearest body before `limit`.
Hit meet_bodies(const Stage& stage, const Ray& ray, double limit) {
    Hit hit;
    hit.t = limit;
    for (const Group& group : stage.groups) {
        double from = 0;
        double to = hit.t;
        if (!enter_box(ray, group.low, group.high, from, to)) continue;
        for (const auto& body : group.bodies) {
            double begin = 0;
            double end = hit.t;
            if (!enter_box(ray, body->low, body->high, begin, end)) continue;
            const double t = march(*body, ray, begin, end);
            if (t < hit.t) hit = {t, body.get(), {}};
        }
    }
    return hit;
}

bool any_body(const Stage& stage, const Ray& ray, double limit) {
    for (const Group& group : stage.groups) {
        double from = 0;
        double to = limit;
        if (!enter_box(ray, group.low, group.high, from, to)) continue;
        for (const auto& body : group.bodies) {
            double begin = 0;
            double end = limit;
            if (!enter_box(ray, body->low, body->high, begin, end)) continue;
            if (march(*body, ray, begin, end) < end) return true;
        }
    }
    return false;
}

Hit meet_room(const Room& room, const Ray& ray) {
    Hit hit;
    const auto wall = [&](double plane, double origin, double inverse, Vec normal) {
        const double t = (plane - origin) * inverse;
        if (t > 1e-6 && t < hit.t) hit = {t, nullptr, normal};
    };
    const Vec& d = ray.direction;
    const Vec& o = ray.origin;
    wall(d.x < 0 ? room.low.x : room.high.x, o.x, ray.inverse.x, {d.x < 0 ? 1.0 : -1.0, 0, 0});
    wall(d.y < 0 ? room.low.y : room.high.y, o.y, ray.inverse.y, {0, d.y < 0 ? 1.0 : -1.0, 0});
    wall(d.z < 0 ? room.low.z : room.high.z, o.z, ray.inverse.z, {0, 0, d.z < 0 ? 1.0 : -1.0});
    const double t = -o.y * ray.inverse.y;
    if (t > 1e-6 && t < hit.t) {
        const Vec p = ray.at(t);
        if (std::fabs(p.x) < room.table_half_width && p.z > room.table_back &&
            p.z < room.table_front) {
            hit = {t, nullptr, {0, d.y < 0 ? 1.0 : -1.0, 0}};
        }
    }
    return hit;
}

Hit meet(const Stage& stage, const Ray& ray) {
    const Hit room = meet_room(stage.room, ray);
    const Hit body = meet_bodies(stage, ray, room.t);
    return body.body != nullptr ? body : room;
}

// Whether light gets from p towards `direction` and out of the window.
bool sees_outside(const Stage& stage, Vec p, Vec direction) {
    const Room& room = stage.room;
    if (direction.x >= -1e-4) return false;
    const double t = (room.low.x - p.x) / direction.x;
    const Vec q = p + direction * t;
    if (!room.through_pane(q.y, q.z)) return false;
    if (p.y * q.y < 0) return false;  // the table is between
    return !any_body(stage, {p, direction}, t);
}

template <typename Height>
Vec gradient(Height height, Vec p, double step) {
    // Four corners of a tetrahedron give the gradient of a field.
    constexpr std::array<Vec, 4> corners{{{1, -1, -1}, {-1, -1, 1}, {-1, 1, -1}, {1, 1, 1}}};
    Vec sum;
    for (const Vec& c : corners) sum += c * height(p + c * step);
    return sum / (4 * step);
}

// The normal that the coat and the light see: the outline's, tilted by the relief where it shows.
Vec shading_normal(const Stage& stage, const Hit& hit, Vec p, bool close) {
    if (hit.body != nullptr) {
        const auto field = [&](Vec q) {
            return hit.body->distance(q) - (close ? hit.body->relief(q) : 0);
        };
        return normalised(gradient(field, p, 0.012));
    }
    if (!close) return hit.normal;
    const Vec slope = gradient([&](Vec q) { return stage.room.relief(q, hit.normal); }, p, 0.012);
    return normalised(hit.normal - slope + hit.normal * dot(slope, hit.normal));
}

// Reflectance of a dielectric coat (Schlick 1994).
double coat_reflectance(double shine, double cos_angle) {
    const double m = clamp01(1 - cos_angle);
    return shine + (1 - shine) * m * m * m * m * m * (shine > 0 ? 1 : 0);
}

// Microfacets after Walter et al. 2007 (GGX): density of half vectors, and shadowing on one side.
double facet_density(double cos_half, double alpha) {
    const double a2 = alpha * alpha;
    const double k = cos_half * cos_half * (a2 - 1) + 1;
    return a2 / (pi * k * k);
}

double facet_shadow(double cos_angle, double alpha) {
    const double c2 = cos_angle * cos_angle;
    return 2 / (1 + std::sqrt(1 + alpha * alpha * (1 - c2) / c2));
}

Vec cosine_direction(const Frame& frame, Sampler& sampler) {
    const double u = sampler.next();
    const double turn = 2 * pi * sampler.next();
    const double radius = std::sqrt(u);
    return frame.to_world({radius * cosine(turn), std::sqrt(1 - u), radius * sine(turn)});
}

struct Place {
    Vec point;
    Vec normal;  // towards the viewer
    Vec view;    // towards where the ray came from
    Surface surface;
    double alpha;
};

Vec diffuse_part(const Surface& surface, double facing) {
    const double share = facing > 0 ? 1 - surface.translucency : surface.translucency;
    return surface.colour * (share * std::fabs(facing) / pi);
}

// Whether light from there can matter and arrives; leaves let it through from behind.
bool arrives(const Stage& stage, const Place& at, Vec direction, double facing) {
    if (facing <= 0 && at.surface.translucency == 0) return false;
    return sees_outside(stage, at.point + at.normal * (facing > 0 ? 0.006 : -0.15), direction);
}

Vec from_sun(const Stage& stage, const Place& at, Sampler& sampler) {
    const double turn = 2 * pi * sampler.next();
    const double away = stage.lights.sun_spread * std::sqrt(sampler.next());
    const Frame sun(stage.lights.to_sun);
    const Vec direction = normalised(sun.to_world({away * cosine(turn), 1, away * sine(turn)}));
    const double facing = dot(at.normal, direction);
    if (!arrives(stage, at, direction, facing)) return {};
    Vec sum = diffuse_part(at.surface, facing);
    const double viewing = std::max(0.02, dot(at.normal, at.view));
    if (facing > 0) {
        const Vec half = normalised(direction + at.view);
        const double coat = coat_reflectance(at.surface.shine, dot(half, at.view)) *
                            facet_density(dot(half, at.normal), at.alpha) *
                            facet_shadow(facing, at.alpha) * facet_shadow(viewing, at.alpha) /
                            (4 * viewing);
        sum += Vec{coat, coat, coat};
    }
    return stage.lights.sun * sum;
}

// The diffuse part only: the coat finds the window by itself.
Vec from_window(const Stage& stage, const Place& at, Sampler& sampler) {
    const Room& room = stage.room;
    const double y = mix(room.window_low, room.window_high, sampler.next());
    const double z = mix(room.window_back, room.window_front, sampler.next());
    const Vec way = Vec{room.low.x, y, z} - at.point;
    const double range = length(way);
    const Vec direction = way / range;
    const double facing = dot(at.normal, direction);
    if (!arrives(stage, at, direction, facing)) return {};
    const double area =
        (room.window_high - room.window_low) * (room.window_front - room.window_back);
    return stage.lights.sky * diffuse_part(at.surface, facing) *
           (area * -direction.x / (range * range));
}

// Chooses where the path goes on; the weight is multiplied into `throughput`. Returns whether the
// coat was taken (then the window counts when it is met), or nothing at the end of the path.
std::optional<bool> scatter(const Place& at, Sampler& sampler, Vec& direction, Vec& throughput) {
    const double viewing = std::max(0.02, dot(at.normal, at.view));
    const double coat = coat_reflectance(at.surface.shine, viewing);
    const double chance = at.surface.shine > 0 ? std::clamp(coat * 2, 0.15, 0.8) : 0;
    const Frame frame(at.normal);
    if (sampler.next() < chance) {
        const double u = sampler.next();
        const double turn = 2 * pi * sampler.next();
        const double cos_half = std::sqrt((1 - u) / (1 + (at.alpha * at.alpha - 1) * u));
        const double sin_half = std::sqrt(std::max(0.0, 1 - cos_half * cos_half));
        const Vec half = frame.to_world({sin_half * cosine(turn), cos_half, sin_half * sine(turn)});
        const double along = dot(at.view, half);
        direction = half * (2 * along) - at.view;
        const double leaving = dot(direction, at.normal);
        if (leaving <= 0.001 || along <= 0) return std::nullopt;
        throughput *= coat_reflectance(at.surface.shine, along) * facet_shadow(leaving, at.alpha) *
                      facet_shadow(viewing, at.alpha) * along / (viewing * cos_half * chance);
        return true;
    }
    direction = cosine_direction(frame, sampler);
    if (at.surface.translucency > 0 && sampler.next() < at.surface.translucency) {
        direction = -direction;
    }
    throughput *= (1 - coat) / (1 - chance);  // times the colour, which the caller keeps apart
    return false;
}

Vec direct_light(const Stage& stage, const Place& at, Sampler& sampler, int bounce) {
    // Further on, one of the two lights, taken double, will do.
    const bool both = bounce <= 1;
    const bool take_sun = both || sampler.next() < 0.5;
    Vec light;
    if (take_sun) light += from_sun(stage, at, sampler);
    if (both || !take_sun) light += from_window(stage, at, sampler);
    return light * (both ? 1.0 : 2.0);
}

}  // namespace

Seen look(const Stage& stage, Ray ray, Sampler& sampler) {
    Seen seen;
    Vec throughput{1, 1, 1};
    bool coat_taken = true;
    bool detour = false;
    for (int bounce = 0; bounce < longest_path; ++bounce) {
        const Hit hit = meet(stage, ray);
        const Vec p = ray.at(hit.t);
        Vec& light = detour ? seen.detour : seen.light;
        if (hit.body == nullptr && hit.normal.x > 0.5 && stage.room.through_pane(p.y, p.z)) {
            if (coat_taken) light += throughput * stage.lights.sky;
            break;
        }
        Place at{p, shading_normal(stage, hit, p, bounce == 0), -ray.direction, {}, 0};
        at.surface = hit.body != nullptr ? hit.body->surface(p) : stage.room.surface(p, hit.normal);
        if (dot(at.normal, at.view) < 0 && at.surface.translucency > 0) at.normal = -at.normal;
        at.alpha = at.surface.roughness * at.surface.roughness;
        Vec direct = throughput * direct_light(stage, at, sampler, bounce);
        // Rare paths of great weight would show as bright dots.
        const double cap = bounce == 0 ? 40 : 3;
        if (largest(direct) > cap) direct *= cap / largest(direct);
        light += direct;

        Vec direction;
        const auto coat = scatter(at, sampler, direction, throughput);
        if (bounce == 0) {
            seen.colour = at.surface.colour;
            seen.normal = shading_normal(stage, hit, p, false);
            seen.point = p;
        }
        if (!coat) break;
        coat_taken = *coat;
        if (!coat_taken && bounce == 0) detour = true;
        if (!coat_taken && bounce > 0) throughput *= at.surface.colour;
        if (bounce >= 2) {
            const double survival = std::min(0.95, largest(throughput));
            if (sampler.next() >= survival) break;
            throughput *= 1 / survival;
        }
        const double lift = dot(direction, at.normal) > 0 ? 0.006 : -0.15;
        ray = Ray(p + at.normal * lift, direction);
    }
    return seen;
}

}  // namespace tincture::samples
