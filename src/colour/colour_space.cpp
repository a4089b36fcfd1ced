#include "colour/colour_space.h"

#include <lcms2.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <stdexcept>

#include "support/error.h"

namespace tincture {
namespace {

struct CloseProfile {
    void operator()(void* profile) const noexcept { cmsCloseProfile(profile); }
};
struct DeleteTransform {
    void operator()(void* transform) const noexcept { cmsDeleteTransform(transform); }
};
struct DeleteContext {
    void operator()(cmsContext context) const noexcept { cmsDeleteContext(context); }
};
using ProfileHandle = std::unique_ptr<void, CloseProfile>;
using TransformHandle = std::unique_ptr<void, DeleteTransform>;
using ContextHandle = std::unique_ptr<std::remove_pointer_t<cmsContext>, DeleteContext>;

// No cache: it is shared state. No optimisation: it trades accuracy for 8-bit tables.
constexpr cmsUInt32Number transform_flags = cmsFLAGS_NOCACHE | cmsFLAGS_NOOPTIMIZE;

constexpr std::size_t batch = 1024;

cmsUInt32Number float_format(ColourModel model) {
    switch (model) {
        case ColourModel::grey:
            return TYPE_GRAY_FLT;
        case ColourModel::rgb:
            return TYPE_RGB_FLT;
        case ColourModel::cmyk:
            return TYPE_CMYK_FLT;
    }
    return 0;
}

// The parametric curve of IEC 61966-2-1, inverse of the encoding.
ProfileHandle srgb_grey_profile(cmsContext context) {
    const std::array<cmsFloat64Number, 5> parameters = {2.4, 1 / 1.055, 0.055 / 1.055, 1 / 12.92,
                                                        0.04045};
    cmsToneCurve* curve = cmsBuildParametricToneCurve(context, 4, parameters.data());
    ProfileHandle profile(cmsCreateGrayProfileTHR(context, cmsD50_xyY(), curve));
    cmsFreeToneCurve(curve);
    return profile;
}

std::string description_of(cmsHPROFILE profile) {
    std::array<char, 256> text{};
    cmsGetProfileInfoASCII(profile, cmsInfoDescription, "en", "US", text.data(),
                           static_cast<cmsUInt32Number>(text.size()));
    return text.data();
}

const char* model_name(cmsUInt32Number signature) {
    switch (signature) {
        case cmsSigGrayData:
            return "grey";
        case cmsSigRgbData:
            return "RGB";
        case cmsSigCmykData:
            return "CMYK";
        default:
            return "other";
    }
}

cmsColorSpaceSignature signature_of(ColourModel model) {
    switch (model) {
        case ColourModel::grey:
            return cmsSigGrayData;
        case ColourModel::rgb:
            return cmsSigRgbData;
        case ColourModel::cmyk:
            return cmsSigCmykData;
    }
    return cmsSigRgbData;
}

float stepped(float value) {
    const double steps = std::nearbyint(static_cast<double>(value) * lab_steps_per_unit);
    return static_cast<float>(steps / lab_steps_per_unit);
}

}  // namespace

struct ColourSpace::Impl {
    ContextHandle context{cmsCreateContext(nullptr, nullptr)};
    ColourModel model = ColourModel::rgb;
    bool standard = false;
    bool grey_as_rgb = false;  // a grey picture with an RGB profile
    std::string subject;
    std::string description;
    std::vector<std::uint8_t> icc;
    TransformHandle forward;   // device floats to Lab floats
    TransformHandle backward;  // Lab doubles to RGB floats, where there is a way

    void build(cmsHPROFILE profile) {
        const ProfileHandle lab(cmsCreateLab4ProfileTHR(context.get(), nullptr));
        const cmsUInt32Number format = float_format(grey_as_rgb ? ColourModel::rgb : model);
        forward.reset(cmsCreateTransformTHR(context.get(), profile, format, lab.get(), TYPE_Lab_FLT,
                                            INTENT_RELATIVE_COLORIMETRIC, transform_flags));
        if (model == ColourModel::rgb) {
            backward.reset(cmsCreateTransformTHR(context.get(), lab.get(), TYPE_Lab_DBL, profile,
                                                 TYPE_RGB_FLT, INTENT_RELATIVE_COLORIMETRIC,
                                                 transform_flags));
        }
    }

    // `in` as to_lab() takes it, at most `batch` colours.
    void convert(const float* in, std::size_t n, float* out) const {
        std::array<float, 4 * batch> device;
        const float* source = in;
        if (grey_as_rgb) {
            for (std::size_t i = 0; i < n; ++i) std::fill_n(&device[3 * i], 3, in[i]);
            source = device.data();
        } else if (model == ColourModel::cmyk) {  // LittleCMS counts ink in percent
            std::transform(in, in + 4 * n, device.data(), [](float ink) { return ink * 100.0F; });
            source = device.data();
        }
        cmsDoTransform(forward.get(), source, out, static_cast<cmsUInt32Number>(n));
    }
};

std::shared_ptr<const ColourSpace::Impl> ColourSpace::standard_impl(ColourModel model) {
    auto impl = std::make_shared<Impl>();
    impl->model = model;
    impl->standard = true;
    impl->description = "sRGB";
    const ProfileHandle profile =
        model == ColourModel::grey ? srgb_grey_profile(impl->context.get())
                                   : ProfileHandle(cmsCreate_sRGBProfileTHR(impl->context.get()));
    impl->build(profile.get());
    return impl;
}

ColourSpace ColourSpace::standard(ColourModel model) {
    if (model == ColourModel::cmyk) {
        throw std::invalid_argument("there is no standard CMYK colour space");
    }
    if (model == ColourModel::grey) {
        static const std::shared_ptr<const Impl> grey = standard_impl(model);
        return ColourSpace(grey);
    }
    static const std::shared_ptr<const Impl> rgb = standard_impl(ColourModel::rgb);
    return ColourSpace(rgb);
}

ColourSpace ColourSpace::from_icc(std::span<const std::uint8_t> icc, ColourModel model,
                                  const std::string& subject) {
    auto impl = std::make_shared<Impl>();
    impl->model = model;
    impl->subject = subject;
    impl->icc.assign(icc.begin(), icc.end());
    const ProfileHandle profile(cmsOpenProfileFromMemTHR(impl->context.get(), icc.data(),
                                                         static_cast<cmsUInt32Number>(icc.size())));
    if (!profile) {
        throw Error(ErrorKind::input, subject,
                    "the colour profile is damaged; name one that is sound with --profile FILE");
    }
    // Numbers: a damaged profile holds some that are none of the enumerations' values.
    const auto found = static_cast<cmsUInt32Number>(cmsGetColorSpace(profile.get()));
    const auto kind = static_cast<cmsUInt32Number>(cmsGetDeviceClass(profile.get()));
    impl->grey_as_rgb = model == ColourModel::grey && found == cmsSigRgbData;
    const bool describes_a_device = kind == cmsSigInputClass || kind == cmsSigDisplayClass ||
                                    kind == cmsSigOutputClass || kind == cmsSigColorSpaceClass;
    if (!describes_a_device || (found != signature_of(model) && !impl->grey_as_rgb)) {
        throw Error(ErrorKind::input, subject,
                    std::string("the colour profile is of the wrong kind (") + model_name(found) +
                        (describes_a_device ? "" : ", not a device's") + "): the picture is " +
                        model_name(signature_of(model)) +
                        "; name a fitting one with --profile FILE");
    }
    impl->description = description_of(profile.get());
    impl->build(profile.get());
    if (!impl->forward) {
        throw Error(ErrorKind::input, subject,
                    "the colour profile has no usable way to CIELAB; name another with "
                    "--profile FILE");
    }
    return ColourSpace(std::move(impl));
}

ColourModel ColourSpace::model() const noexcept {
    return impl_->model;
}
bool ColourSpace::is_standard() const noexcept {
    return impl_->standard;
}
const std::string& ColourSpace::description() const noexcept {
    return impl_->description;
}
std::span<const std::uint8_t> ColourSpace::icc() const noexcept {
    return impl_->icc;
}
bool ColourSpace::is_writable() const noexcept {
    return impl_->backward != nullptr;
}

void ColourSpace::to_lab(const float* device, std::size_t n, LabPlanes out) const {
    std::array<float, 3 * batch> lab;
    const auto channels = static_cast<std::size_t>(channel_count(impl_->model));
    for (std::size_t start = 0; start < n; start += batch) {
        const std::size_t size = std::min(batch, n - start);
        impl_->convert(device + start * channels, size, lab.data());
        for (std::size_t i = 0; i < size; ++i) {
            out.L[start + i] = stepped(lab[3 * i]);
            out.a[start + i] = stepped(lab[3 * i + 1]);
            out.b[start + i] = stepped(lab[3 * i + 2]);
            // Written so that a NaN fails as well. Real spaces stay below 200.
            const bool sane = std::abs(lab[3 * i]) < 500.0F && std::abs(lab[3 * i + 1]) < 500.0F &&
                              std::abs(lab[3 * i + 2]) < 500.0F;
            if (!sane) {
                throw Error(ErrorKind::input, impl_->subject,
                            "the colour profile leads to impossible colours; name another with "
                            "--profile FILE");
            }
        }
    }
}

Rgb8 ColourSpace::to_rgb8(const Lab& lab) const {
    const std::array<double, 3> in = {lab.L, lab.a, lab.b};
    std::array<float, 3> out{};
    cmsDoTransform(impl_->backward.get(), in.data(), out.data(), 1);
    const auto rounded = [](float value) {
        return static_cast<std::uint8_t>(std::nearbyint(std::clamp(value, 0.0F, 1.0F) * 255.0F));
    };
    return {rounded(out[0]), rounded(out[1]), rounded(out[2])};
}

Lab ColourSpace::lab_of(Rgb8 rgb) const {
    const std::array<float, 3> device = {static_cast<float>(rgb.r) / 255.0F,
                                         static_cast<float>(rgb.g) / 255.0F,
                                         static_cast<float>(rgb.b) / 255.0F};
    float L = 0;
    float a = 0;
    float b = 0;
    to_lab(device.data(), 1, {&L, &a, &b});
    return {L, a, b};
}

}  // namespace tincture
