"""Checks an exported chain of snapshots with Python's standard library alone.

Usage: verify_chain.py FILE [HEAD]. Exit status 0 if all is well, 1 if something is wrong with the chain.
It follows the recipe in snapshot-format.md and shares no code with the program. Signatures are not checked:
the standard library has no elliptic curves.
"""
import hashlib
import json
import sys
from decimal import Decimal


def number(text):
    """A number as ECMAScript writes it: repr() gives the same digits, the layout differs."""
    value = float(text)
    if value in (float("inf"), float("-inf")):
        raise ValueError("a number beyond the range of a double")
    if value == 0:
        return "0"
    sign, digits, exponent = Decimal(repr(abs(value))).as_tuple()
    digits = "".join(map(str, digits)).lstrip("0")
    point = len(digits) + exponent
    digits = digits.rstrip("0")
    if 0 < point <= 21:
        body = digits.ljust(point, "0") if len(digits) <= point else digits[:point] + "." + digits[point:]
    elif -6 < point <= 0:
        body = "0." + "0" * -point + digits
    else:
        body = digits[0] + ("." + digits[1:] if digits[1:] else "") + "e%+d" % (point - 1)
    return ("-" if value < 0 else "") + body


def once(pairs):
    if len(dict(pairs)) < len(pairs):
        raise ValueError("a name occurs twice in one object")
    return dict(pairs)


class Number(str):
    """A number, kept as its canonical text."""


def canonical(value):
    if isinstance(value, dict):
        names = sorted(value, key=lambda name: name.encode("utf-16-be"))
        return "{" + ",".join(canonical(name) + ":" + canonical(value[name]) for name in names) + "}"
    if isinstance(value, list):
        return "[" + ",".join(map(canonical, value)) + "]"
    return value[:] if isinstance(value, Number) else json.dumps(value, ensure_ascii=False)


def sha256(value):
    return hashlib.sha256(canonical(value).encode("utf-8")).hexdigest()


def check(line, sequence, previous):
    document = json.loads(line.decode("utf-8"), parse_float=lambda t: Number(number(t)), object_pairs_hook=once,
                          parse_int=lambda t: Number(number(t)), parse_constant=lambda t: Number("refused"))
    hashed = {k: v for k, v in document.items() if k not in ("sha256", "signature", "state", "circuit")}
    yield canonical(document).encode("utf-8") == line, "the line is not canonical"
    yield document["format"] == "evenhand-snapshot/1", "the format is unknown"
    yield document["sequence"] == str(sequence), "the sequence is not the one due"
    yield document["previous_sha256"] == previous, "it does not follow on the one before it"
    yield sha256(hashed) == document["sha256"], "its contents do not give its hash"
    for part in ("state", "circuit"):
        yield part not in document or sha256(document[part]) == document.get(part + "_sha256"), "its %s was changed" % part
    check.last = document["sha256"]


def main(path, head=None):
    with open(path, "rb") as file:
        lines = file.read().split(b"\n")
    lines = lines[:-1] if lines[-1] == b"" else lines
    check.last = "0" * 64
    for sequence, line in enumerate(lines, start=1):
        try:
            wrong = [what for good, what in check(line, sequence, check.last) if not good]
        except (ValueError, KeyError, TypeError, AttributeError) as error:
            wrong = ["it cannot be read (%s)" % error]
        if wrong:
            return "snapshot %d: %s" % (sequence, "; ".join(wrong))
    if not lines or (head and check.last != head):
        return "the file ends with snapshot %d, which is not the head" % len(lines)
    print("%d snapshots, head %s" % (len(lines), check.last))
    return None


if __name__ == "__main__":
    problem = main(*sys.argv[1:])
    if problem:
        print(problem)
    sys.exit(1 if problem else 0)
