"""Colour arithmetic of its own, in double precision, to check the program against.

sRGB is IEC 61966-2-1; its primaries and white are adapted to the D50 of ICC profiles (ICC.1:2010,
7.2.16: 0.9642 1 0.8249) with the Bradford matrix (ICC.1:2010, annex E). CIELAB is CIE 15:2004.
"""
import numpy as np

D50 = np.array([0.9642, 1.0, 0.8249])
BRADFORD = np.array([[0.8951, 0.2664, -0.1614], [-0.7502, 1.7135, 0.0367], [0.0389, -0.0685, 1.0296]])
SRGB_PRIMARIES = ((0.64, 0.33), (0.30, 0.60), (0.15, 0.06))
# Those of SMPTE RP 431-2 with the white of sRGB.
WIDE_PRIMARIES = ((0.680, 0.320), (0.265, 0.690), (0.150, 0.060))
D65 = (0.3127, 0.3290)


def xyz_of_xy(x, y):
    return np.array([x / y, 1.0, (1 - x - y) / y])


def rgb_to_xyz_d50(primaries, white=D65):
    """The 3 x 3 matrix from linear RGB to XYZ, adapted to D50."""
    columns = np.stack([xyz_of_xy(*xy) for xy in primaries], axis=1)
    white_xyz = xyz_of_xy(*white)
    matrix = columns * np.linalg.solve(columns, white_xyz)
    cones = (BRADFORD @ D50) / (BRADFORD @ white_xyz)
    return np.linalg.inv(BRADFORD) @ np.diag(cones) @ BRADFORD @ matrix


def srgb_to_linear(value):
    value = np.asarray(value, dtype=float)
    return np.where(value <= 0.04045, value / 12.92, ((value + 0.055) / 1.055) ** 2.4)


def xyz_to_lab(xyz):
    t = np.asarray(xyz, dtype=float) / D50
    f = np.where(t > (6 / 29) ** 3, np.cbrt(t), t * (29 / 6) ** 2 / 3 + 4 / 29)
    return np.stack([116 * f[..., 1] - 16, 500 * (f[..., 0] - f[..., 1]), 200 * (f[..., 1] - f[..., 2])], axis=-1)


def lab_to_xyz(lab):
    lab = np.asarray(lab, dtype=float)
    fy = (lab[..., 0] + 16) / 116
    f = np.stack([fy + lab[..., 1] / 500, fy, fy - lab[..., 2] / 200], axis=-1)
    return np.where(f > 6 / 29, f**3, (f - 4 / 29) * 3 * (6 / 29) ** 2) * D50


class RgbSpace:
    """A space of three primaries: `lab` of device values in 0..1, and `device` values of Lab."""

    def __init__(self, matrix, to_linear, from_linear):
        self.matrix, self.to_linear, self.from_linear = matrix, to_linear, from_linear

    def lab(self, device):
        return xyz_to_lab(self.to_linear(device) @ self.matrix.T)

    def device(self, lab):
        linear = lab_to_xyz(lab) @ np.linalg.inv(self.matrix).T
        return self.from_linear(np.clip(linear, 0, 1))


def _srgb_from_linear(value):
    return np.where(value <= 0.0031308, value * 12.92, 1.055 * np.maximum(value, 0) ** (1 / 2.4) - 0.055)


SRGB = RgbSpace(rgb_to_xyz_d50(SRGB_PRIMARIES), srgb_to_linear, _srgb_from_linear)


def gamma_space(matrix, gamma):
    return RgbSpace(matrix, lambda v: np.asarray(v, dtype=float) ** gamma, lambda v: v ** (1 / gamma))


def lab_of_hex(text):
    return SRGB.lab(np.array([int(text[i : i + 2], 16) for i in (1, 3, 5)]) / 255)


def squared_distances(lab, palette):
    """Squared CIE 1976 differences, one row a colour, one column a palette colour."""
    return ((lab[:, None, :] - palette[None, :, :]) ** 2).sum(axis=-1)


def ciede2000(one, two):
    """G. Sharma, W. Wu, E. N. Dalal, Color Research and Application 30 (2005) 21-30; its symbols."""
    one, two = np.broadcast_arrays(np.asarray(one, dtype=float), np.asarray(two, dtype=float))
    L1, a1, b1 = np.moveaxis(one, -1, 0)
    L2, a2, b2 = np.moveaxis(two, -1, 0)
    C_bar = (np.hypot(a1, b1) + np.hypot(a2, b2)) / 2
    G = 0.5 * (1 - np.sqrt(C_bar**7 / (C_bar**7 + 25.0**7)))
    a1, a2 = (1 + G) * a1, (1 + G) * a2
    C1, C2 = np.hypot(a1, b1), np.hypot(a2, b2)
    h1, h2 = np.degrees(np.arctan2(b1, a1)) % 360, np.degrees(np.arctan2(b2, a2)) % 360
    grey = C1 * C2 == 0

    half_turn = 180 + 1e-9  # rounding must not decide about hues that are exactly opposite
    dh = h2 - h1
    dh = np.where(dh > half_turn, dh - 360, np.where(dh < -half_turn, dh + 360, dh))
    dh = np.where(grey, 0, dh)
    dL, dC = L2 - L1, C2 - C1
    dH = 2 * np.sqrt(C1 * C2) * np.sin(np.radians(dh / 2))

    L_bar, C_bar = (L1 + L2) / 2, (C1 + C2) / 2
    total = h1 + h2
    h_bar = np.where(np.abs(h1 - h2) <= half_turn, total / 2, np.where(total < 360, total / 2 + 180, total / 2 - 180))
    h_bar = np.where(grey, total, h_bar)
    T = (1 - 0.17 * np.cos(np.radians(h_bar - 30)) + 0.24 * np.cos(np.radians(2 * h_bar))
         + 0.32 * np.cos(np.radians(3 * h_bar + 6)) - 0.20 * np.cos(np.radians(4 * h_bar - 63)))
    d_theta = 30 * np.exp(-(((h_bar - 275) / 25) ** 2))
    R_C = 2 * np.sqrt(C_bar**7 / (C_bar**7 + 25.0**7))
    S_L = 1 + 0.015 * (L_bar - 50) ** 2 / np.sqrt(20 + (L_bar - 50) ** 2)
    S_C = 1 + 0.045 * C_bar
    S_H = 1 + 0.015 * C_bar * T
    R_T = -np.sin(np.radians(2 * d_theta)) * R_C
    return np.sqrt((dL / S_L) ** 2 + (dC / S_C) ** 2 + (dH / S_H) ** 2 + R_T * (dC / S_C) * (dH / S_H))
