"""Files that are wrong in a known way, and one small picture in every format."""
import base64
import io
import struct

from PIL import Image

import pictures

# Two flat halves of 16 x 24 pixels, (200, 60, 40) and (20, 90, 160), written by libavif 0.11.1.
AVIF = base64.b64decode("""
AAAAIGZ0eXBhdmlmAAAAAGF2aWZtaWYxbWlhZk1BMUEAAADybWV0YQAAAAAAAAAoaGRscgAAAAAAAAAAcGljdAAAAAAAAAAAAAAA
AGxpYmF2aWYAAAAADnBpdG0AAAAAAAEAAAAeaWxvYwAAAABEAAABAAEAAAABAAABGgAAADEAAAAoaWluZgAAAAAAAQAAABppbmZl
AgAAAAABAABhdjAxQ29sb3IAAAAAamlwcnAAAABLaXBjbwAAABRpc3BlAAAAAAAAACAAAAAYAAAAEHBpeGkAAAAAAwgICAAAAAxh
djFDgSAAAAAAABNjb2xybmNseAABAA0AAIAAAAAXaXBtYQAAAAAAAAABAAEEAQKDBAAAADltZGF0EgAKCDgRP3YQENACMiMQAABF
Icdl2cIJ6TcjH/0o4VtR6OIaAhl7pCQST0irogVG4A==
""")

FORMATS = ("png", "jpg", "tif", "webp", "bmp", "ppm", "avif")


def picture_bytes(extension):
    """A noisy picture of 120 x 90 pixels; the AVIF is flat."""
    if extension == "avif":
        return AVIF
    file = io.BytesIO()
    kind = {"jpg": "JPEG", "tif": "TIFF"}.get(extension, extension.upper())
    options = {"webp": {"lossless": True}, "tif": {"compression": "tiff_lzw"}}.get(extension, {})
    Image.fromarray(pictures.noisy()).save(file, kind, **options)
    return file.getvalue()


def huge_png(width, height):
    head = struct.pack(">IIBBBBB", width, height, 8, 2, 0, 0, 0)
    chunks = [(b"IHDR", head), (b"IDAT", b"x\x9c" + b"\0" * 64), (b"IEND", b"")]
    return b"\x89PNG\r\n\x1a\n" + b"".join(pictures.png_chunk(*chunk) for chunk in chunks)


def huge_bmp(width, height):
    return b"BM" + struct.pack("<IHHI", 118, 0, 0, 54) + struct.pack(
        "<IiiHHIIiiII", 40, width, height, 1, 24, 0, 0, 2835, 2835, 0, 0) + b"\0" * 64


def huge_ppm(width, height):
    return f"P6\n{width} {height}\n255\n".encode() + b"\0" * 64


def huge_tif(width, height):
    """TIFF 6.0, one strip that claims to hold everything."""
    fields = [(256, 4, width), (257, 4, height), (258, 3, 8), (259, 3, 1), (262, 3, 2), (273, 4, 8), (277, 3, 3),
              (278, 4, height), (279, 4, 64)]
    directory = struct.pack("<H", len(fields))
    directory += b"".join(struct.pack("<HHII", tag, kind, 1, value) for tag, kind, value in fields)
    return b"II*\0" + struct.pack("<I", 8 + 64) + b"\0" * 64 + directory + struct.pack("<I", 0)


def huge_jpg(width, height):
    data = bytearray(picture_bytes("jpg"))
    at = next(i for i in range(len(data)) if data[i] == 0xFF and data[i + 1] in (0xC0, 0xC2))
    data[at + 5 : at + 9] = struct.pack(">HH", height, width)
    return bytes(data)


HUGE = {"png": huge_png, "bmp": huge_bmp, "ppm": huge_ppm, "tif": huge_tif}
