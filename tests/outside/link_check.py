#!/usr/bin/env python3
"""Unpacks a link with programs that Linewright does not use, and makes one for it to read.

  link_check.py check LINK TEXT   the link holds the same values as the TOML file TEXT
  link_check.py make TEXT         prints a link that holds TEXT as it stands

LINK and TEXT are files; "-" is standard input. base64url is read by Python's base64 module (RFC 4648),
the raw DEFLATE stream (RFC 1951) by Python's zlib and, with a header and a trailer of RFC 1952 put
around it, by gzip as well; the text by Python's tomllib. The exit code is 0 when all agree, 1 when
something does not, 2 for a wrong call.
"""
import base64
import re
import shutil
import struct
import subprocess
import sys
import tomllib
import zlib

MARK = "lw1."


def read(name):
    if name == "-":
        return sys.stdin.buffer.read()
    with open(name, "rb") as file:
        return file.read()


def fail(reason):
    sys.exit(f"link_check: {reason}")


def packed_bytes(link):
    fragment = link.strip().split("#", 1)[-1]
    if not fragment.startswith(MARK):
        fail(f"the link does not begin with {MARK}")
    data = fragment[len(MARK):]
    if not re.fullmatch(r"[A-Za-z0-9_-]+", data):
        fail("a character outside the alphabet of RFC 4648, section 5")
    packed = base64.urlsafe_b64decode(data + "=" * (-len(data) % 4))
    if base64.urlsafe_b64encode(packed).decode().rstrip("=") != data:
        fail("the text is not the one that its bytes give")
    return packed


def unpacked_by_zlib(packed):
    stream = zlib.decompressobj(-15)
    text = stream.decompress(packed)
    if not stream.eof or stream.unused_data:
        fail("the stream does not end with the data")
    return text


def unpacked_by_gzip(packed, text):
    header = bytes([0x1F, 0x8B, 8, 0, 0, 0, 0, 0, 0, 255])
    trailer = struct.pack("<II", zlib.crc32(text), len(text))
    done = subprocess.run(["gzip", "-dc"], input=header + packed + trailer, capture_output=True, check=False)
    if done.returncode != 0:
        fail("gzip: " + done.stderr.decode().strip())
    return done.stdout


def check(link, expected):
    packed = packed_bytes(read(link).decode())
    text = unpacked_by_zlib(packed)
    if shutil.which("gzip") and unpacked_by_gzip(packed, text) != text:
        fail("gzip and zlib unpack different texts")
    held = tomllib.loads(text.decode())
    wanted = tomllib.loads(read(expected).decode())
    if held != wanted:
        fail(f"the values differ:\n  in the link {held}\n  in the text {wanted}")


def make(text):
    packer = zlib.compressobj(6, zlib.DEFLATED, -15)
    packed = packer.compress(read(text)) + packer.flush()
    print(MARK + base64.urlsafe_b64encode(packed).decode().rstrip("="))


if len(sys.argv) == 4 and sys.argv[1] == "check":
    check(sys.argv[2], sys.argv[3])
elif len(sys.argv) == 3 and sys.argv[1] == "make":
    make(sys.argv[2])
else:
    print(__doc__, file=sys.stderr)
    sys.exit(2)
