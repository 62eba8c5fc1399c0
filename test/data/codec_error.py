"""Makes codec_error.json: what video codecs do to a small sine of known amplitude.

A patch of Gaussian blobs moves by a known sine before a still background of the same kind, with 2 DN of noise;
each codec of ffmpeg encodes it; the patch is found again by least squares with the true texture (shift,
gain, offset), so that the codec alone decides the error. Needs numpy, scipy and ffmpeg; takes some minutes.
Run: python3 codec_error.py > codec_error.json
"""

import json
import os
import subprocess
import sys
import tempfile

import numpy as np
from scipy.interpolate import CubicSpline

WIDTH, HEIGHT, FRAMES, RATE, DRIVE_HZ = 256, 192, 240, 60, 3.1
CX, CY, HALF, ROOM = 128, 96, 30, 50
INTER = ["-g", "60"]
CODECS = [
    *(("inter", f"x264 crf {q}", ["-c:v", "libx264", *INTER, "-bf", "0", "-crf", str(q)]) for q in (18, 21, 24, 28)),
    *(("inter", f"x265 crf {q}", ["-c:v", "libx265", *INTER, "-x265-params", "log-level=error:bframes=0", "-crf", str(q)])
      for q in (18, 21, 24, 28)),
    *(("intra", f"mjpeg q {q}", ["-c:v", "mjpeg", "-q:v", str(q)]) for q in (2, 5, 12)),
    ("intra", "prores lt", ["-c:v", "prores_ks", "-profile:v", "1"]),
    ("intra", "dnxhr sq", ["-c:v", "dnxhd", "-profile:v", "dnxhr_sq"]),
]
PIXELS = {"mjpeg": "yuvj420p", "prores_ks": "yuv422p10le", "dnxhd": "yuv422p"}

rng = np.random.default_rng(5)


def blobs(px, py, count, spread, sizes, contrast):
    """Sum of Gaussian blobs, as a function of the shift in x."""
    x = rng.uniform(CX - spread, CX + spread, count)
    y = rng.uniform(CY - spread, CY + spread, count)
    size = rng.uniform(*sizes, count)
    height = rng.normal(0, contrast, count)

    def at(shift):
        out = np.zeros_like(px)
        for k in range(count):
            gx = np.exp(-((px[0] - shift - x[k]) ** 2) / (2 * size[k] ** 2))
            gy = np.exp(-((py[:, 0] - y[k]) ** 2) / (2 * size[k] ** 2))
            out += height[k] * np.outer(gy, gx)
        return out

    return at


def grid(x0, x1, y0, y1):
    y, x = np.mgrid[y0:y1, x0:x1].astype(float)
    return x, y


background = 120 + blobs(*grid(0, WIDTH, 0, HEIGHT), 1500, 130, (0.9, 2.5), 20)(0)
shifts = np.arange(-6, 7, 0.1)
moving = blobs(*grid(CX - ROOM, CX + ROOM + 1, CY - ROOM, CY + ROOM + 1), 700, 60, (0.9, 2), 28)
texture = CubicSpline(shifts, np.stack([moving(s) for s in shifts]))
slope = texture.derivative()
inner = slice(ROOM - HALF, ROOM + HALF + 1)
times = np.arange(FRAMES) / RATE


def frames_of(amplitude):
    noise = np.random.default_rng(1)
    truth = amplitude * np.sin(2 * np.pi * DRIVE_HZ * times + 0.3) + 0.37
    images = []
    for shift in truth:
        image = background.copy()
        image[CY - ROOM : CY + ROOM + 1, CX - ROOM : CX + ROOM + 1] = 120 + texture(shift)
        images.append(np.clip(np.rint(image + noise.normal(0, 2, image.shape)), 16, 235).astype(np.uint8))
    return np.stack(images)


def coded(raw, arguments, path):
    chroma = np.full((HEIGHT // 2) * (WIDTH // 2) * 2, 128, np.uint8).tobytes()
    subprocess.run(
        ["ffmpeg", "-v", "error", "-y", "-f", "rawvideo", "-pix_fmt", "yuv420p", "-s", f"{WIDTH}x{HEIGHT}", "-r", str(RATE),
         "-i", "-", *arguments, "-pix_fmt", PIXELS.get(arguments[1], "yuv420p"), path],
        input=b"".join(image.tobytes() + chroma for image in raw), check=True)
    out = subprocess.run(["ffmpeg", "-v", "error", "-i", path, "-vf", "extractplanes=y", "-f", "rawvideo", "-"],
                         capture_output=True, check=True).stdout
    kind = np.uint8 if len(out) == raw.size else np.dtype("<u2")
    return np.frombuffer(out, kind).reshape(raw.shape).astype(float)


def tracked(images):
    found, shift = [], 0.37
    for image in images:
        window = image[CY - HALF : CY + HALF + 1, CX - HALF : CX + HALF + 1].ravel()
        for _ in range(6):
            t = texture(shift)[inner, inner].ravel()
            d = slope(shift)[inner, inner].ravel()
            gain, step, _ = np.linalg.lstsq(np.c_[t, d, np.ones_like(t)], window, rcond=None)[0]
            shift += np.clip(step / gain, -1, 1)
        found.append(shift)
    return np.array(found)


def measured(images):
    x = tracked(images)
    phase = 2 * np.pi * DRIVE_HZ * times
    design = np.c_[np.cos(phase), np.sin(phase), np.ones(FRAMES)]
    fit = np.linalg.lstsq(design, x, rcond=None)[0]
    return float(np.hypot(fit[0], fit[1])), float(np.std(x - design @ fit))


rows = []
with tempfile.TemporaryDirectory() as folder:
    path = os.path.join(folder, "clip.mov")
    for amplitude in (0.05, 0.1, 0.2, 0.5, 1, 2, 5):
        raw = frames_of(amplitude)
        for compression, codec, arguments in CODECS:
            seen, residual = measured(coded(raw, arguments, path))
            bits = os.path.getsize(path) * 8 / (WIDTH * HEIGHT * FRAMES)
            rows.append({"codec": codec, "compression": compression, "truePx": amplitude, "seenPx": round(seen, 5),
                         "residualPx": round(residual, 5), "bitsPerPixel": round(bits, 4)})
            print(rows[-1], file=sys.stderr, flush=True)
print(json.dumps({"source": "measured: codec_error.py", "ffmpeg": subprocess.run(
    ["ffmpeg", "-version"], capture_output=True, text=True, check=True).stdout.split()[2], "rows": rows}, indent=1))
