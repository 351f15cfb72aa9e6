"""Proving the ground you stand on, through the hub's public API: where to stand, three setups that lean on the
control, their network adjusted, and the control that comes of it. Needs Python 3.9 and its standard library:

    HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_... python3 control-walk.py

Every run makes a project of its own.
"""

import json
import os
import sys
import time
from datetime import datetime, timezone
from pathlib import Path
from urllib.error import HTTPError
from urllib.request import Request, urlopen

# Answers speak of σ and ″, whatever the terminal was set to.
sys.stdout.reconfigure(encoding="utf-8")
sys.stderr.reconfigure(encoding="utf-8")

DATA = Path(__file__).resolve().parent.parent / "data"


def now():
    return datetime.now(timezone.utc).isoformat(timespec="milliseconds")


def stop(what, errors=()):
    print(what, file=sys.stderr)
    for error in errors:
        print("  {pointer} ({code}): {detail} {fix}".format(**error), file=sys.stderr)
    sys.exit(1)


def setting(name):
    return os.environ.get(name) or stop(f"Set {name} first; examples/README.md says how.")


HUB = setting("HUBTACK_URL").rstrip("/")
KEY = setting("HUBTACK_KEY")
STARTED = now()


def exchange(method, path, value=None, step=None):
    """Sends a request to a path as the hub itself writes them; its JSON and its headers. A problem ends the walk."""
    headers = {"Authorization": f"Bearer {KEY}"}
    body = None
    if value is not None:
        headers["Content-Type"] = "application/json"
        body = json.dumps(value).encode()
    if method == "POST":
        # A second try carries the same key: what was done already is not done twice, its answer comes again.
        headers["Idempotency-Key"] = f"{STARTED}-{step or path}"
    for tries in range(1, 4):
        try:
            request = Request(f"{HUB}{path}", body, headers, method=method)
            with urlopen(request, timeout=30) as response:
                return json.load(response), response.headers
        except HTTPError as error:
            pause = error.headers.get("Retry-After")
            if pause is None or tries == 3:
                stop_at(f"{method} {path}", error)
        except OSError as error:
            pause = 1
            if tries == 3:
                stop(f"{HUB} does not answer ({getattr(error, 'reason', error)}).")
        except ValueError:
            stop(f"{HUB} answers, but not as a hub does.")
        time.sleep(int(pause))


def stop_at(request, error):
    try:
        problem = json.load(error)
    except ValueError:
        stop(f"{HUB} answers, but not as a hub does: {error.code}.")
    what = "{}: {status} {code}. {detail}".format(request, **problem)
    stop(what, problem.get("errors", ()))


def get(path):
    return exchange("GET", path)[0]


def post(path, value, step=None):
    return exchange("POST", path, value, step)[0]


def data(name):
    """A file of examples/data, with the present time where it says NOW."""
    text = (DATA / f"{name}.json").read_text(encoding="utf-8")
    return json.loads(text.replace('"NOW"', f'"{now()}"'))


def upload(name):
    """Uploads a file of observations. An item that was refused ends the walk too, though its neighbours are in."""
    receipt = post(f"{site}/uploads", data(name), name)
    if receipt["refused"]:
        stop(f"Some of {name} was refused:", receipt["refused"])
    return receipt


def finish(job, headers):
    """Asks after a job until it has ended, no oftener than the hub wants to be asked, and reads what came of it."""
    at = headers["Location"]
    while job["status"] in ("queued", "running"):
        time.sleep(int(headers["Retry-After"]))
        job, headers = exchange("GET", at)
    if job["status"] != "succeeded":
        problem = job["problem"] or {"code": "none", "detail": "Somebody called it off."}
        stop("Job {id} {status}: ".format(**job) + "{code}. {detail}".format(**problem), problem.get("errors", ()))
    return get(job["result"])


def every(path):
    """Every item of a list, page by page."""
    cursor = ""
    while cursor is not None:
        page = get(f"{path}&limit=200" + (cursor and f"&cursor={cursor}"))
        yield from page["data"]
        cursor = page["nextCursor"]


def say_setup(setup, how):
    position = setup["position"]
    print(f"\nSetup {setup['station']} {how}: {setup['verdict'].upper()}")
    print(f"  {setup['radio']}")
    good = setup["errorEllipse"]["semiMajor"]
    print(f"  E {position['easting']:.3f} ft, N {position['northing']:.3f} ft, good to {good:.3f} ft at 95 %")
    for reason in setup["reasons"][:3]:
        print(f"  - {reason['text']}")


# The control as it was published, the instruments, and the benchmarks levelled through.
project = post(
    "/api/v1/projects",
    {"name": f"Thistledown Yard control by Python, {STARTED[:19]}Z", "lengthUnit": "ft", "frame": {"kind": "local"}},
)
site = f"/api/v1/projects/{project['id']}"
print(f"Project: {project['name']}, {project['id']}")
control = post(f"{site}/control-points", data("control"))
if control["refused"]:
    stop("Some control was refused:", control["refused"])
print(f"Control: {control['counts']['created']} points")
post(f"{site}/instruments", data("instrument"), "station")
post(f"{site}/instruments", data("level"), "level")
run = upload("level-run")["levelRuns"][0]
misclosure = run["closure"]["misclosure"]
print(f"Level run {run['from']} to {run['to']}: {run['verdict'].upper()}, misclosure {misclosure:.3f} ft")

# Where to stand, before anybody walks there.
forecast = post(f"{site}/setup-forecasts", data("setup-forecast"))
print(f"\nForecast: {forecast['summary']}")

# Over the gate's benchmark; then on the pad by angles alone, and by shots of which nobody named the targets.
backsight = upload("setup-backsight")["setups"][0]
say_setup(backsight, f"over {backsight['occupied']['point']} by backsights")
say_setup(upload("setup-angles-only")["setups"][0], "by angles alone")
unnamed = upload("setup-identify")["setups"][0]
say_setup(unnamed, "by {matched} of {reflectors} reflectors identified".format(**unnamed["identification"]))

# What all of them together say of one mark.
mark = f"{site}/control-points/HT-103"
before = get(mark)
print(f"\nControl {before['name']}, version {before['version']}: {before['health']['finding'].upper()}")
print(f"  {before['health']['text']}")

# All of it in one network. It takes longer than a request: the hub answers with a job.
adjustment = finish(*exchange("POST", f"{site}/adjustments", data("adjustment")))
at = f"{site}/adjustments/{adjustment['id']}"
verdict = adjustment["verdict"]
result = adjustment["result"]
print(f"\nAdjustment \"{adjustment['name']}\": {verdict.upper()}, sigma0 {result['fit']['sigma0']:.2f}")
for reason in result["reasons"]:
    print(f"  - {reason['text']}")
# Where nothing else controls an observation, it has no w.
tested = [one for one in every(f"{at}/observations?removed=false") if one["standardised"] is not None]
if tested:
    worst = max(tested, key=lambda one: abs(one["standardised"]))
    names = (worst[key] for key in ("kind", "setup", "levelRun", "to", "component"))
    what = " ".join(filter(None, names))
    print(f"  Worst residual: {what}, {worst['residual']:.3f} {worst['unit']}, w {worst['standardised']:.2f}")

# A trial run until somebody applies it: a pass may be, a hold by another person with a note, a fail never.
if verdict == "pass":
    applied = post(f"{at}/apply", {})
    print(f"  Applied: {len(applied['points'])} points have a new version")
    after = get(mark)
    place = "E {easting:.3f} ft, N {northing:.3f} ft, elevation {elevation:.3f} ft".format(**after)
    print(f"  {after['name']}, version {after['version']}: {place}")
    print(f"  sigma in plan {after['sigma']['horizontal']:.3f} ft, was {before['sigma']['horizontal']:.3f} ft")
else:
    why = {"hold": "on hold, another person applies it with a note", "fail": "a fail stays a trial run"}
    print(f"  Not applied: {why[verdict]}.")
