#!/usr/bin/env python3
"""Opens the file of one block on its rig and checks it before anything moves.

Needs Debian's python3-jwcrypto. The rig keeps two keys: its own private key, with which files are
opened, and the server's public key, with which they are checked.

  open_block.py FILE --rig-key rig-private.json --server-key server-public.json \
      --participant TW-001 --visit 2 --block 1 [--now 2027-03-11T09:00:00Z]

Prints the block as JSON and exits with 0, or says why it refuses it and exits with 1: then run the
fallback that the protocol declares (plain practice).
"""
import argparse
import datetime
import json
import sys

from jwcrypto import jwe, jwk, jws
from jwcrypto.common import JWException

# What a block of each kind needs beside its count of trials; any one name of a group will do.
NEEDS = {
    "baseline": [], "practice": [], "probe": [], "washout": [], "retention": [], "recovery": [],
    "maintenance": [],
    "region": [["region"]],
    "shift": [["rule", "levels"]],
    "clamp": [["feedback"]],
    "transfer": [["targetOffset"]],
}
FEEDBACKS = ("shown", "hidden", "clamped-to-zero", "clamped-to-noise")
SIZE = 16384  # every signed content is filled up with blanks to this size


def read_key(path):
    with open(path, encoding="utf-8") as file:
        return jwk.JWK.from_json(file.read())


def parse_instant(text):
    return datetime.datetime.fromisoformat(text.replace("Z", "+00:00"))


def open_block(sealed, rig_key, server_key):
    """Decrypts with the rig's key and checks the server's signature."""
    envelope = jwe.JWE(algs=["ECDH-ES", "A256GCM"])
    envelope.deserialize(sealed, rig_key)
    signed = jws.JWS()
    signed.allowed_algs = ["EdDSA"]
    signed.deserialize(envelope.payload.decode("ascii"), server_key)
    if len(signed.payload) != SIZE:
        raise ValueError(f"content is {len(signed.payload)} bytes, expected {SIZE}")
    return json.loads(signed.payload)


def find_fault(block, wanted, now):
    """Why this block must not run here and now, or None."""
    for name in ("participant", "visit", "block"):
        if wanted[name] is not None and block[name] != wanted[name]:
            return f"it is for {name} {block[name]}, not {wanted[name]}"
    if now >= parse_instant(block["expiresAt"]):
        return f"it expired at {block['expiresAt']}"
    return find_plan_fault(block["plan"], block["limits"], block.get("variables", []))


def find_plan_fault(plan, limits, variables):
    """Why this kind of block cannot be run as it stands, or None."""
    kind, parameters = plan["kind"], plan["parameters"]
    if kind not in NEEDS:
        return f"this rig knows no block of kind {kind}"
    trials = parameters.get("trials", 0)
    if not 1 <= trials <= limits["trialsPerVisit"]:
        return f"it asks for {trials} trials, the limit is {limits['trialsPerVisit']}"
    for names in NEEDS[kind]:
        if not any(name in parameters for name in names):
            return f"a block of kind {kind} needs {' or '.join(names)}"
    feedback = parameters.get("feedback", "shown")
    if feedback not in FEEDBACKS:
        return f"this rig knows no feedback {feedback}"
    if feedback == "clamped-to-noise" and "clampSd" not in parameters:
        return "feedback clamped to noise needs clampSd"
    if len(parameters.get("levels", [0] * trials)) < trials:
        return "it has fewer levels of the target than trials"
    return find_region_fault(parameters.get("region"), limits, variables)


def find_region_fault(region, limits, variables):
    """A region's centre must be a movement that this rig allows."""
    if region is None:
        return None
    for variable, coordinate in zip(variables, region["center"]):
        value = variable["origin"] + variable["scale"] * coordinate
        most = limits["variableMax"].get(variable["name"])
        if most is not None and abs(value) > most:
            return f"its region lies at {variable['name']} {value:g}, the limit is {most:g}"
    return None


def main():
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("file")
    parser.add_argument("--rig-key", required=True)
    parser.add_argument("--server-key", required=True)
    parser.add_argument("--participant")
    parser.add_argument("--visit", type=int)
    parser.add_argument("--block", type=int)
    parser.add_argument("--now", help="the rig's clock; default: now")
    given = parser.parse_args()
    now = parse_instant(given.now) if given.now else datetime.datetime.now(datetime.timezone.utc)
    try:
        with open(given.file, encoding="ascii") as file:
            block = open_block(file.read().strip(), read_key(given.rig_key), read_key(given.server_key))
    except (JWException, ValueError, OSError) as error:
        print(f"refused: {error}", file=sys.stderr)
        return 1
    wanted = {"participant": given.participant, "visit": given.visit, "block": given.block}
    fault = find_fault(block, wanted, now)
    if fault:
        print(f"refused: {fault}", file=sys.stderr)
        return 1
    json.dump(block, sys.stdout, indent=1)
    print()
    return 0


if __name__ == "__main__":
    sys.exit(main())
