"""Pictures and colour profiles to run the program on: drawn, not fetched, and the same each time."""
import struct
import zlib

import numpy as np
from PIL import Image, ImageDraw, ImageFont

from colour_maths import D65, WIDE_PRIMARIES, rgb_to_xyz_d50

FONT = "/usr/share/fonts/truetype/roboto/unhinted/RobotoTTF/Roboto-Medium.ttf"
INKS = ((244, 236, 220), (22, 45, 74), (196, 62, 38), (238, 178, 42), (92, 140, 112))


def poster(width=160, height=120):
    """Five flat inks and lettering; blends along its edges only."""
    scale = 4
    sheet = Image.new("RGB", (width * scale, height * scale), INKS[0])
    draw = ImageDraw.Draw(sheet)
    w, h = sheet.size
    draw.rectangle((0, h * 0.62, w, h), fill=INKS[1])
    draw.ellipse((w * 0.58, h * 0.08, w * 0.92, h * 0.08 + w * 0.34), fill=INKS[3])
    draw.polygon(((w * 0.08, h * 0.62), (w * 0.3, h * 0.2), (w * 0.52, h * 0.62)), fill=INKS[2])
    draw.rectangle((w * 0.55, h * 0.5, w * 0.95, h * 0.62), fill=INKS[4])
    draw.text((w * 0.06, h * 0.66), "Kite Day", font=ImageFont.truetype(FONT, int(h * 0.28)), fill=INKS[0])
    return np.asarray(sheet.resize((width, height), Image.Resampling.BOX))


def flat_areas():
    """Three colours and nothing between them."""
    pixels = np.empty((24, 40, 3), np.uint8)
    pixels[:, :20], pixels[:, 20:32], pixels[:, 32:] = (200, 30, 40), (250, 250, 245), (20, 40, 120)
    return pixels


def noisy(width=120, height=90, seed=1, spread=9.0):
    """Smooth hues under noise: nearly every pixel has a colour of its own."""
    x, y = np.meshgrid(np.linspace(0, 1, width), np.linspace(0, 1, height))
    smooth = np.stack([70 + 150 * x, 60 + 120 * y * (1 - x) + 40 * x, 190 - 140 * x * y], axis=-1)
    noise = np.random.RandomState(seed).normal(0, spread, smooth.shape)
    return np.clip(np.round(smooth + noise), 0, 255).astype(np.uint8)


def deep(width=90, height=60):
    """16 bits a channel, with steps that 8 bits do not hold."""
    x, y = np.meshgrid(np.linspace(0, 1, width), np.linspace(0, 1, height))
    smooth = np.stack([0.2 + 0.6 * x, 0.5 - 0.3 * y + 0.1 * x, 0.3 + 0.5 * y * x], axis=-1)
    noise = np.random.RandomState(2).normal(0, 0.01, smooth.shape)
    return np.clip(np.round((smooth + noise) * 65535), 0, 65535).astype(np.uint16)


def grey(width=100, height=70):
    rows = noisy(width, height, seed=3)
    return rows[:, :, 1]


def vivid(width=110, height=80):
    """Device values near the ends of their range, beyond sRGB where the primaries are wide."""
    pixels = noisy(width, height, seed=4).astype(int)
    pixels[: height // 2, : width // 2] = pixels[: height // 2, : width // 2] // 4 + (0, 190, 0)
    pixels[height // 2 :, : width // 2] = pixels[height // 2 :, : width // 2] // 4 + (190, 0, 0)
    return np.clip(pixels, 0, 255).astype(np.uint8)


def with_alpha(pixels, alpha):
    return np.concatenate([pixels, alpha[:, :, None].astype(pixels.dtype)], axis=2)


def png_chunk(kind, data):
    return struct.pack(">I", len(data)) + kind + data + struct.pack(">I", zlib.crc32(kind + data))


def png_bytes(pixels, profile=None, dpi=None):
    """PNG of 8 or 16 bits with 1 to 4 channels (ISO/IEC 15948)."""
    pixels = pixels[:, :, None] if pixels.ndim == 2 else pixels
    height, width, channels = pixels.shape
    bits = 16 if pixels.dtype == np.uint16 else 8
    colour_type = {1: 0, 2: 4, 3: 2, 4: 6}[channels]
    rows = pixels.astype(">u2" if bits == 16 else np.uint8).tobytes()
    row_size = len(rows) // height
    raw = b"".join(b"\0" + rows[at : at + row_size] for at in range(0, len(rows), row_size))
    chunks = [png_chunk(b"IHDR", struct.pack(">IIBBBBB", width, height, bits, colour_type, 0, 0, 0))]
    if profile is not None:
        chunks.append(png_chunk(b"iCCP", b"made\0\0" + zlib.compress(profile)))
    if dpi is not None:
        x, y = (round(value / 0.0254) for value in dpi)
        chunks.append(png_chunk(b"pHYs", struct.pack(">IIB", x, y, 1)))
    chunks += [png_chunk(b"IDAT", zlib.compress(raw, 1)), png_chunk(b"IEND", b"")]
    return b"\x89PNG\r\n\x1a\n" + b"".join(chunks)


def png_chunks(data):
    """Kind and data of each chunk."""
    at, found = 8, []
    while at < len(data):
        size, kind = struct.unpack(">I4s", data[at : at + 8])
        found.append((kind.decode("ascii"), data[at + 8 : at + 8 + size]))
        at += 12 + size
    return found


def save_png(path, pixels, **options):
    path.write_bytes(png_bytes(pixels, **options))
    return path


# ICC profiles, version 2 (ICC.1:2001-04).


def s15_fixed16(*values):
    return b"".join(struct.pack(">i", round(value * 65536)) for value in values)


def icc_profile(kind, space, connection, tags):
    """`tags`: pairs of signature and data."""
    count = len(tags)
    body, table, offset = b"", b"", 128 + 4 + 12 * count
    for signature, data in tags:
        data += b"\0" * (-len(data) % 4)
        table += signature + struct.pack(">II", offset + len(body), len(data))
        body += data
    size = offset + len(body)
    head = struct.pack(">I4sI4s4s4s", size, b"none", 0x02400000, kind, space, connection)
    head += struct.pack(">6H", 2026, 1, 1, 0, 0, 0) + b"acsp" + b"\0" * 28
    head += s15_fixed16(0.9642, 1.0, 0.8249)
    return head.ljust(128, b"\0") + struct.pack(">I", count) + table + body


def icc_description(text):
    raw = text.encode("ascii") + b"\0"
    return b"desc\0\0\0\0" + struct.pack(">I", len(raw)) + raw + b"\0" * 78


GAMMA = 563 / 256  # what an 8.8 fixed-point number holds of 2.2
WIDE_MATRIX = np.round(rgb_to_xyz_d50(WIDE_PRIMARIES, D65) * 65536) / 65536


def wide_profile():
    """Wide primaries, gamma 2.2."""
    curve = b"curv\0\0\0\0" + struct.pack(">IH", 1, round(GAMMA * 256)) + b"\0\0"
    tags = [(b"desc", icc_description("Wide test space")), (b"cprt", b"text\0\0\0\0none\0"),
            (b"wtpt", b"XYZ \0\0\0\0" + s15_fixed16(0.9642, 1.0, 0.8249))]
    for letter, column in zip((b"r", b"g", b"b"), WIDE_MATRIX.T):
        tags += [(letter + b"XYZ", b"XYZ \0\0\0\0" + s15_fixed16(*column)), (letter + b"TRC", curve)]
    return icc_profile(b"mntr", b"RGB ", b"XYZ ", tags)


def cmyk_profile():
    """Ink to Lab through the sixteen corners of an invented press."""
    corners = b""
    for i in range(16):
        c, m, y, k = (i >> shift & 1 for shift in (3, 2, 1, 0))
        L = 255 * (1 - 0.38 * c) * (1 - 0.45 * m) * (1 - 0.07 * y) * (1 - 0.85 * k)
        a, b = 128 - 35 * c + 70 * m - 5 * y, 128 - 45 * c - 5 * m + 85 * y
        mix = 1 - 0.9 * k
        corners += bytes(round(v) for v in (L, 128 + (a - 128) * mix, 128 + (b - 128) * mix))
    ramp = bytes(range(256))
    table = b"mft1\0\0\0\0" + bytes((4, 3, 2, 0)) + s15_fixed16(1, 0, 0, 0, 1, 0, 0, 0, 1)
    table += ramp * 4 + corners + ramp * 3
    tags = [(b"desc", icc_description("Invented press")), (b"cprt", b"text\0\0\0\0none\0"),
            (b"wtpt", b"XYZ \0\0\0\0" + s15_fixed16(0.9642, 1.0, 0.8249)), (b"A2B0", table)]
    return icc_profile(b"prtr", b"CMYK", b"Lab ", tags)


def cmyk_picture():
    pixels = np.zeros((32, 48, 4), np.uint8)
    pixels[:, :16, 0], pixels[:, 16:32, 1], pixels[8:, 32:, 2], pixels[:8, 32:, 3] = 230, 210, 240, 250
    return Image.fromarray(pixels, "CMYK")
