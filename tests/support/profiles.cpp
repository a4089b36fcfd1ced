#include "tests/support/profiles.h"

#include <lcms2.h>

#include <array>
#include <cmath>
#include <stdexcept>

#include "tests/support/pictures.h"

namespace tincture::test_support {
namespace {

Bytes saved(cmsHPROFILE profile) {
    cmsUInt32Number size = 0;
    cmsSaveProfileToMem(profile, nullptr, &size);
    Bytes bytes(size);
    if (!cmsSaveProfileToMem(profile, bytes.data(), &size)) throw std::runtime_error("not saved");
    cmsCloseProfile(profile);
    return bytes;
}

// Lab of four inks on white paper: each lets through a part of the light and tints it.
int ink_to_lab(const cmsUInt16Number in[], cmsUInt16Number out[], void* /*unused*/) {
    const std::array<double, 4> ink = {in[0] / 65535.0, in[1] / 65535.0, in[2] / 65535.0,
                                       in[3] / 65535.0};
    cmsCIELab lab;
    lab.L =
        95 * (1 - 0.45 * ink[0]) * (1 - 0.5 * ink[1]) * (1 - 0.1 * ink[2]) * (1 - 0.85 * ink[3]);
    lab.a = (-35 * ink[0] + 70 * ink[1] - 5 * ink[2]) * (1 - 0.9 * ink[3]);
    lab.b = (-45 * ink[0] - 5 * ink[1] + 90 * ink[2]) * (1 - 0.9 * ink[3]);
    cmsFloat2LabEncoded(out, &lab);
    return 1;
}

int light_to_lab(const cmsUInt16Number in[], cmsUInt16Number out[], void* /*unused*/) {
    cmsCIELab lab;
    lab.L = (in[0] + 2.0 * in[1] + in[2]) / (4 * 655.35);
    lab.a = (1.0 * in[0] - in[1]) / 700;
    lab.b = (1.0 * in[1] - in[2]) / 700;
    cmsFloat2LabEncoded(out, &lab);
    return 1;
}

Bytes table_profile(cmsProfileClassSignature kind, cmsColorSpaceSignature colours,
                    cmsUInt32Number channels, cmsSAMPLER16 sampler) {
    const cmsHPROFILE profile = cmsCreateProfilePlaceholder(nullptr);
    cmsSetProfileVersion(profile, 4.3);
    cmsSetDeviceClass(profile, kind);
    cmsSetColorSpace(profile, colours);
    cmsSetPCS(profile, cmsSigLabData);
    cmsPipeline* pipeline = cmsPipelineAlloc(nullptr, channels, 3);
    cmsStage* table = cmsStageAllocCLut16bit(nullptr, 5, channels, 3, nullptr);
    cmsStageSampleCLut16bit(table, sampler, nullptr, 0);
    cmsPipelineInsertStage(pipeline, cmsAT_END,
                           cmsStageAllocToneCurves(nullptr, channels, nullptr));
    cmsPipelineInsertStage(pipeline, cmsAT_END, table);
    cmsPipelineInsertStage(pipeline, cmsAT_END, cmsStageAllocToneCurves(nullptr, 3, nullptr));
    cmsWriteTag(profile, cmsSigAToB0Tag, pipeline);
    cmsWriteTag(profile, cmsSigMediaWhitePointTag, cmsD50_XYZ());
    cmsPipelineFree(pipeline);
    return saved(profile);
}

cmsUInt32Number double_format(ColourModel model) {
    switch (model) {
        case ColourModel::grey:
            return TYPE_GRAY_DBL;
        case ColourModel::rgb:
            return TYPE_RGB_DBL;
        case ColourModel::cmyk:
            return TYPE_CMYK_DBL;
    }
    return 0;
}

void* transform_to_lab(cmsHPROFILE profile, ColourModel model) {
    const cmsHPROFILE lab = cmsCreateLab4Profile(nullptr);
    void* transform =
        cmsCreateTransform(profile, double_format(model), lab, TYPE_Lab_DBL,
                           INTENT_RELATIVE_COLORIMETRIC, cmsFLAGS_NOCACHE | cmsFLAGS_NOOPTIMIZE);
    cmsCloseProfile(lab);
    cmsCloseProfile(profile);
    if (transform == nullptr) throw std::runtime_error("no way to Lab");
    return transform;
}

}  // namespace

Bytes wide_gamut_profile() {
    const cmsCIExyYTRIPLE primaries = {
        {0.7347, 0.2653, 1}, {0.1152, 0.8264, 1}, {0.1566, 0.0177, 1}};
    cmsToneCurve* gamma = cmsBuildGamma(nullptr, 1.8);
    std::array<cmsToneCurve*, 3> curves = {gamma, gamma, gamma};
    Bytes bytes = saved(cmsCreateRGBProfile(cmsD50_xyY(), &primaries, curves.data()));
    cmsFreeToneCurve(gamma);
    return bytes;
}

Bytes grey_profile() {
    cmsToneCurve* gamma = cmsBuildGamma(nullptr, 2.2);
    Bytes bytes = saved(cmsCreateGrayProfile(cmsD50_xyY(), gamma));
    cmsFreeToneCurve(gamma);
    return bytes;
}

Bytes cmyk_profile() {
    return table_profile(cmsSigOutputClass, cmsSigCmykData, 4, ink_to_lab);
}

Bytes rgb_table_profile() {
    return table_profile(cmsSigInputClass, cmsSigRgbData, 3, light_to_lab);
}

Bytes lab_profile() {
    return saved(cmsCreateLab4Profile(nullptr));
}

Bytes link_profile() {
    cmsToneCurve* gamma = cmsBuildGamma(nullptr, 1.1);
    std::array<cmsToneCurve*, 3> curves = {gamma, gamma, gamma};
    Bytes bytes = saved(cmsCreateLinearizationDeviceLink(cmsSigRgbData, curves.data()));
    cmsFreeToneCurve(gamma);
    return bytes;
}

LcmsLab::LcmsLab()
    : transform_(transform_to_lab(cmsCreate_sRGBProfile(), ColourModel::rgb)), full_(1) {}

LcmsLab::LcmsLab(std::span<const std::uint8_t> icc, ColourModel model)
    : transform_(transform_to_lab(
          cmsOpenProfileFromMem(icc.data(), static_cast<cmsUInt32Number>(icc.size())), model)),
      full_(model == ColourModel::cmyk ? 100 : 1) {}

LcmsLab::~LcmsLab() {
    cmsDeleteTransform(transform_);
}

Lab LcmsLab::operator()(const std::vector<double>& device) const {
    std::vector<double> in = device;
    for (double& value : in) value *= full_;
    std::array<double, 3> out{};
    cmsDoTransform(transform_, in.data(), out.data(), 1);
    return {out[0], out[1], out[2]};
}

Lab LcmsLab::operator()(const Picture& picture, std::size_t pixel) const {
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    std::vector<double> device;
    for (std::size_t c = 0; c < channels; ++c) {
        device.push_back(sample_at(picture, pixel * channels + c) /
                         (picture.bits == 16 ? 65535.0 : 255.0));
    }
    return (*this)(device);
}

}  // namespace tincture::test_support
