#!/usr/bin/env python3
"""Reads an unlocked .understory file from its format page alone (main/project/FORMAT.md).

    python3 read-study.py FILE [--head HASH]

Prints one line a record: sequence, kind, offset, payload length, then an edit's JSON, or of any
other record the payload's SHA-256. Last comes the chain's hash. Exit 0: every record and the chain
hold (and the hash is HASH). 1: they do not. 2: this is no unlocked study of version 1.
"""

import hashlib
import json
import struct
import sys

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
    if flags & 1:
        sys.exit(quit_with(2, "locked with a password"))
    if length != 32 + id_length + key_length:
        sys.exit(quit_with(1, "damaged header"))
    return data[24 : 24 + id_length], length


def quit_with(code, sentence):
    print(sentence, file=sys.stderr)
    return code


def records(data, study_id, at):
    """Yields (sequence, kind, offset, payload or None when removed, chain)."""
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
        elif sha(salt, payload) != commitment:
            raise ValueError(f"record {sequence} at {at} is not what was written")
        yield sequence, KINDS[kind], at, payload, chain
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
    if len(arguments) not in (1, 3) or (len(arguments) == 3 and arguments[1] != "--head"):
        return quit_with(2, __doc__)
    with open(arguments[0], "rb") as file:
        data = file.read()
    study_id, start = header(data)
    print("study", study_id.decode("utf-8"))
    whole, waiting = [], []
    head = sha(b"understory study\n", study_id)
    damage = None
    try:
        for record in records(data, study_id, start):
            waiting.append(record)
            if record[1] != "blob":
                whole += waiting
                waiting = []
                head = record[4]
    except ValueError as error:
        damage = None if never_filled(data) else error
    for sequence, kind, at, payload, _ in whole:
        print(sequence, kind, at, len(payload or b""), shown(kind, payload))
    print("head", head.hex())
    if damage is not None:
        return quit_with(1, str(damage))
    if len(arguments) == 3 and arguments[2].lower() != head.hex():
        return quit_with(1, "the chain holds, but its hash is another")
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
