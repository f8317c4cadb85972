"""Reads an archive of format version 1 and prints what it holds, one line a value.

Written from the comment of package archive. It needs Python 3 and the public zstd
tool, and refuses what does not agree.

    python3 read.py FILE
"""
import hashlib
import json
import struct
import subprocess
import sys

TABLE = []
for n in range(256):
    for _ in range(8):
        n = n >> 1 ^ (0x82F63B78 if n & 1 else 0)
    TABLE.append(n)


def crc32c(data):
    crc = 0xFFFFFFFF
    for byte in data:
        crc = TABLE[(crc ^ byte) & 255] ^ crc >> 8
    return crc ^ 0xFFFFFFFF


def payload(data, at):
    """Payload of the skippable frame at an offset, and the offset behind it."""
    magic, length = struct.unpack_from("<II", data, at)
    assert magic == 0x184D2A50, "no skippable frame at %d" % at
    body = data[at + 8 : at + 8 + length]
    assert len(body) == length and crc32c(body[:-4]) == struct.unpack("<I", body[-4:])[0], "checksum at %d" % at
    return body[:-4], at + 8 + length


def decompressed(frame):
    return subprocess.run(["zstd", "-dcq"], input=frame, stdout=subprocess.PIPE, check=True).stdout


def words(content, coding):
    """The values of a chunk as 64-bit words."""
    n = len(content) // 8
    if coding == 0:
        return list(struct.unpack("<%dQ" % n, content))
    assert coding == 1, "unknown coding"
    values = []
    for i in range(n):
        x = sum(content[p * n + i] << 8 * p for p in range(8))
        values.append(x >> 1 | (x & 1) << 63)
    return values


def main(path):
    with open(path, "rb") as f:
        data = f.read()
    head, at = payload(data, 0)
    assert head[:12] == b"KETLOOM\r\n\x1a\n\0", "no archive"
    assert struct.unpack("<HH", head[12:16]) == (1, 0), "another version"
    print("created", json.loads(head[16:])["created"])

    trailer, end = payload(data, len(data) - 56)
    assert trailer[:8] == b"KETLEND\n" and end == len(data)
    offset, length, size, before, zero = struct.unpack("<QQQQI", trailer[8:])
    assert size == len(data) and before == 0 and zero == 0 and offset + length == len(data) - 56
    index, end = payload(data, offset)
    assert end == len(data) - 56
    (m,) = struct.unpack_from("<I", index, 0)
    contents = json.loads(index[4 : 4 + m])
    (count,) = struct.unpack_from("<I", index, 4 + m)
    assert len(index) == 8 + m + 24 * count
    table = [struct.unpack_from("<QIIII", index, 8 + m + 24 * i) for i in range(count)]

    number = 0
    for i, sector in enumerate(contents["sectors"]):
        print("sector", i, "dimension", sector["dimension"], "seed", sector["solver"]["Seed"])
        for vector in sector["vectors"]:
            digest = hashlib.sha256()
            print("vector", number, repr(vector["energy"]))
            for k in range(vector["chunks"]):
                descriptor, at = payload(data, at)
                start, size, values, coding, crc = table[vector["first_chunk"] + k]
                assert struct.unpack("<IIIIQII", descriptor) == (number, k, values, coding, size, crc, 0)
                assert start == at, "a gap"
                frame, at = data[at : at + size], at + size
                assert crc32c(frame) == crc
                content = words(decompressed(frame), coding)
                assert len(content) == values
                digest.update(struct.pack("<%dQ" % values, *content))
                for x in content:
                    print("%016x" % x)
            assert digest.hexdigest() == vector["sha256"]
            number += 1
    assert at == offset, "bytes before the index"
    print("end", number)


main(sys.argv[1])
