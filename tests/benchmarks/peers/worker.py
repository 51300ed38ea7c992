"""Runs the peers of the benchmarks: reads one JSON command a line, answers one JSON line.

{"do": "load", "work": NAME, "kind": capture | ring | bridge, ...}  prepares a work; answers {"ok": true}
{"do": "run", "work": NAME, "count": N}   does it N times; answers {"seconds": processor seconds a call, "least": wall}
{"do": "result", "work": NAME, ...}       does it once and answers its values
{"do": "end"}
"""

import json
import sys
import time


def capture(order):
    import numpy as np

    import capture as peer

    names = [channel["name"] for channel in order["channels"]]
    rows = np.fromfile(order["file"], dtype="<i2").reshape(len(names), -1)
    codes = {name: rows[i].copy() for i, name in enumerate(names)}
    scales = {c["name"]: (c["increment"], c["origin"], c["reference"]) for c in order["channels"]}
    settings = order["interval"], order["forward_voltage"], order["dead_time"]
    return lambda: peer.analyse(codes, scales, *settings)


def ring(order):
    import numpy as np

    import ring as peer

    samples = np.fromfile(order["file"], dtype="<f8")

    def work():
        modes = peer.fit(samples, order["interval"])
        return {"frequency": modes[0][0], "damping": modes[0][1], "amplitude": modes[0][2], "order": len(modes)}

    return work


def bridge(order):
    import bridge as peer

    return lambda: peer.simulate(order["circuit"], order["train"], order["start"], order["interval"],
                                 order["points"], order["tolerance"])


KINDS = {"capture": capture, "ring": ring, "bridge": bridge}


def run(work, count):
    least = float("inf")
    began = time.process_time()
    for _ in range(count):
        start = time.perf_counter()
        work()
        least = min(least, time.perf_counter() - start)
    return {"seconds": (time.process_time() - began) / count, "least": least}


def main():
    missing = []
    for module in ("numpy", "scipy"):
        try:
            __import__(module)
        except ImportError:
            missing.append("python3-" + module)
    print(json.dumps({"missing": missing}), flush=True)
    if missing:
        return
    import numpy as np

    np.seterr(all="ignore")  # a trial step that overflows is refused by the search
    works = {}
    for text in sys.stdin:
        order = json.loads(text)
        try:
            if order["do"] == "end":
                return
            if order["do"] == "load":
                works[order["work"]] = KINDS[order["kind"]](order)
                answer = {"ok": True}
            elif order["do"] == "run":
                answer = run(works[order["work"]], order["count"])
            else:
                answer = {"values": works[order["work"]]()}
        except Exception as failure:  # the harness names it and counts the row as not met
            answer = {"error": f"{type(failure).__name__}: {failure}"}
        print(json.dumps(answer), flush=True)


if __name__ == "__main__":
    main()
