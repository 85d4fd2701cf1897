#!/usr/bin/env python3
"""Reads an .understory file from its format page alone (main/project/FORMAT.md).

    python3 read-study.py FILE [--head HASH] [--password-file TEXT]

A locked study needs its password, the first line of TEXT, and the Python package "cryptography".

Prints one line a record: sequence, kind, offset, payload length, then an edit's JSON, or of any
other record the payload's SHA-256. Last comes the chain's hash. Exit 0: every record and the chain
hold (and the hash is HASH). 1: they do not. 2: this is no study of version 1, or it is locked and
the password is missing or wrong. 3: it is locked and "cryptography" is not installed.
"""

import argparse
import base64
import hashlib
import json
import struct
import sys
import unicodedata

KINDS = {1: "edit", 2: "blob", 3: "seal", 4: "note"}
HEAD = 112


def sha(*parts):
    return hashlib.sha256(b"".join(parts)).digest()


def header(data):
    if data[:8] != bytes.fromhex("f7756e6473740d0a") or len(data) < 32:
        sys.exit(quit_with(2, "not a study"))
    version, flags, length, id_length, key_length = struct.unpack_from("<IIIHH", data, 8)
    if not 32 <= length <= min(65536, len(data)):
        sys.exit(quit_with(1, "damaged header"))
    if sha(data[: length - 8])[:8] != data[length - 8 : length]:
        sys.exit(quit_with(1, "damaged header"))
    if version != 1 or flags & ~1:
        sys.exit(quit_with(2, "from a newer version"))
    if length != 32 + id_length + key_length:
        sys.exit(quit_with(1, "damaged header"))
    key_start = 24 + id_length
    keys = data[key_start : key_start + key_length] if flags & 1 else None
    return data[24:key_start], length, keys


def data_key(region, password):
    """The AES-256-GCM of a locked study's payloads."""
    try:
        from cryptography.exceptions import InvalidTag
        from cryptography.hazmat.primitives.ciphers.aead import AESGCM
    except ImportError:
        sys.exit(quit_with(3, 'locked, and the Python package "cryptography" is not installed'))
    wanted = None
    for half in (region[: len(region) // 2], region[len(region) // 2 :]):
        try:
            wanted = wanted or json.loads(half)
        except ValueError:
            pass
    if wanted is None:
        sys.exit(quit_with(1, "damaged header"))
    n, r, p = wanted["n"], wanted["r"], wanted["p"]
    if 128 * n * r > 512 * 1024 * 1024 or n * r * p > 8 * 1024 * 1024:
        sys.exit(quit_with(2, "its key asks for too much memory or work"))
    typed = unicodedata.normalize("NFC", password).encode("utf-8")
    salt, key = base64.b64decode(wanted["salt"]), base64.b64decode(wanted["key"])
    most = 128 * r * (n + p + 2) + 1024
    outer = hashlib.scrypt(typed, salt=salt, n=n, r=r, p=p, maxmem=most, dklen=32)
    try:
        return AESGCM(AESGCM(outer).decrypt(key[:12], key[12:], b"understory data key"))
    except InvalidTag:
        sys.exit(quit_with(2, "wrong password"))


def unlocked(aead, payload, bound):
    """(salt, body) of an encrypted payload, or None."""
    from cryptography.exceptions import InvalidTag

    try:
        plain = aead.decrypt(payload[:12], payload[12:], bound)
    except (InvalidTag, ValueError):
        return None
    return plain[:16], plain[16:]


def quit_with(code, sentence):
    print(sentence, file=sys.stderr)
    return code


def records(data, study_id, at, aead):
    """Yields (sequence, kind, offset, payload length, body or None when removed, chain)."""
    chain = sha(b"understory study\n", study_id)
    expected = 1
    while at < len(data):
        head = data[at : at + HEAD]
        if len(head) < HEAD:
            return
        if head[:4] != b"\xf7fr\n" or sha(head[:104])[:8] != head[104:]:
            raise ValueError(f"no frame at {at}, where record {expected} should be")
        kind, sequence, flags, length = struct.unpack_from("<B3xQII", head, 4)
        salt, commitment, link = head[24:40], head[40:72], head[72:104]
        if sequence != expected:
            raise ValueError(f"record {sequence} at {at}, where record {expected} should be")
        chain = sha(chain, head[:16], commitment)
        if chain != link:
            raise ValueError(f"record {sequence} does not follow from the one before it")
        payload = data[at + HEAD : at + HEAD + length]
        if len(payload) < length:
            return
        if flags & 2:
            payload = None
        else:
            encrypted = bool(flags & 1)
            content = (salt, payload) if not encrypted else None
            if encrypted and aead is not None:
                content = unlocked(aead, payload, head[:72])
            if encrypted == (aead is None):
                content = None
            if content is None or sha(*content) != commitment:
                raise ValueError(f"record {sequence} at {at} is not what was written")
            payload = content[1]
        yield sequence, KINDS[kind], at, length, payload, chain
        at += HEAD + length
        expected += 1


def never_filled(data):
    """The end of a file that the drive lengthened and did not get to write."""
    sector = (len(data) - 1) // 512 * 512
    return not any(data[max(0, min(sector, len(data) - 16)) :])


def shown(kind, payload):
    if payload is None:
        return "removed"
    if kind == "edit":
        return json.dumps(json.loads(payload), sort_keys=True)
    return hashlib.sha256(payload).hexdigest()


def main(arguments):
    parser = argparse.ArgumentParser(usage=__doc__)
    parser.add_argument("file")
    parser.add_argument("--head")
    parser.add_argument("--password-file")
    given = parser.parse_args(arguments)
    with open(given.file, "rb") as file:
        data = file.read()
    study_id, start, keys = header(data)
    aead = None
    if keys is not None:
        if given.password_file is None:
            return quit_with(2, "locked with a password")
        with open(given.password_file, encoding="utf-8", newline="") as file:
            aead = data_key(keys, file.readline().rstrip("\r\n"))
    print("study", study_id.decode("utf-8"))
    whole, waiting = [], []
    head = sha(b"understory study\n", study_id)
    damage = None
    try:
        for record in records(data, study_id, start, aead):
            waiting.append(record)
            if record[1] != "blob":
                whole += waiting
                waiting = []
                head = record[5]
    except ValueError as error:
        damage = None if never_filled(data) else error
    for sequence, kind, at, length, body, _ in whole:
        print(sequence, kind, at, length, shown(kind, body))
    print("head", head.hex())
    if damage is not None:
        return quit_with(1, str(damage))
    if given.head is not None and given.head.lower() != head.hex():
        return quit_with(1, "the chain holds, but its hash is another")
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
