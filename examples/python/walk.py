"""A day on a site through the hub's public API. Needs Python 3.9 and its standard library:

    HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_... python3 walk.py

Every run makes a project of its own.
"""

import json
import os
import sys
import time
from datetime import datetime, timezone
from math import hypot
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


def call(method, path, value=None, step=None):
    """Sends a request and answers its JSON. A problem ends the walk."""
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
            request = Request(f"{HUB}/api/v1{path}", body, headers, method=method)
            with urlopen(request, timeout=30) as response:
                return json.load(response)
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


def data(name):
    """A file of examples/data, with the present time where it says NOW."""
    text = (DATA / f"{name}.json").read_text(encoding="utf-8")
    return json.loads(text.replace('"NOW"', f'"{now()}"'))


def upload(name):
    """Uploads a file of observations. An item that was refused ends the walk too, though its neighbours are in."""
    receipt = call("POST", f"{site}/uploads", data(name), name)
    if receipt["refused"]:
        stop(f"Some of {name} was refused:", receipt["refused"])
    return receipt


def say_setup(setup):
    position = setup["position"]
    print(f"\nSetup {setup['station']}: {setup['verdict'].upper()}")
    print(f"  {setup['radio']}")
    print(f"  E {position['easting']:.3f} ft, N {position['northing']:.3f} ft, axis {setup['instrumentElevation']:.3f} ft")
    for reason in setup["reasons"][:3]:
        print(f"  - {reason['text']}")
    if len(setup["reasons"]) > 3:
        print(f"  - and {len(setup['reasons']) - 3} reasons more")
    for check in setup["checks"]:
        say_check(check)


def say_check(check):
    for target in check["targets"]:
        difference = target["difference"]
        plan = hypot(difference["easting"], difference["northing"])
        print(
            f"  Check on {target['target']} ({target['role']}): {plan:.3f} ft in plan, {target['horizontal']};"
            f" {difference['elevation']:.3f} ft in height, {target['vertical']}"
        )


def say_level(run, test):
    arcsec = test["collimation"]["arcsec"]
    misclosure = run["closure"]["misclosure"]
    print(f"\nLevel {run['instrument']}: {test['verdict'].upper()}, line of sight {arcsec:.1f}\u2033")
    print(f"Level run {run['from']} to {run['to']}: {run['verdict'].upper()}, misclosure {misclosure:.3f} ft")
    print(f"  {run['radio']}")
    for reason in run["reasons"]:
        print(f"  - {reason['text']}")


def say_bench(check):
    print(
        f"\nBench check {check['machine']}, {check['edge']} edge on {check['benchmark']}:"
        f" {check['verdict'].upper()}, {check['difference']:.2f} ft"
    )
    print(f"  {check['instruction']}")


# What the office brings in.
project = call(
    "POST",
    "/projects",
    {"name": f"Thistledown Yard by Python, {STARTED[:19]}Z", "lengthUnit": "ft", "frame": {"kind": "local"}},
)
site = f"/projects/{project['id']}"
print(f"Project: {project['name']}, {project['id']}")

control = call("POST", f"{site}/control-points", data("control"))
if control["refused"]:
    stop("Some control was refused:", control["refused"])
print(f"Control: {control['counts']['created']} points")

instrument = call("POST", f"{site}/instruments", data("instrument"))
print(f"Instrument: {instrument['name']}")

surface = call("POST", f"{site}/surfaces", data("finish"))
print(f"Surface: {surface['name']}, {surface['points']} points, {surface['triangles']} triangles")

layer = call("POST", f"{site}/layers", {**data("layer"), "surfaceId": surface["id"]})
print(f"Layer: {layer['name']}, {layer['offsetText']}")

# Both benchmarks are levelled through before anybody leans on them, with a level that was tested that morning.
call("POST", f"{site}/instruments", data("level"), "level")
levelled = upload("level-run")
say_level(levelled["levelRuns"][0], levelled["pegTests"][0])

# A setup on four targets in both faces, with a check shot on a benchmark outside the fit.
good = upload("setup-good")["setups"][0]
say_setup(good)
if good["verdict"] != "pass":
    stop("This setup should have passed.")

# Put in force for the dozer, together with what it is to cut.
released = call("POST", f"{site}/setups/{good['id']}/release", data("release"))
release = released["release"]
print(f"  Released to {release['machine']} for {release['layer']}, offset {release['offset']:.2f} ft")
print(f"  {released['radio']}")

# Two setups that must not be used: a forgotten prism constant, and a target that a truck has bumped.
say_setup(upload("setup-wrong-prism")["setups"][0])
say_setup(upload("setup-bumped-target")["setups"][0])

# The blade reads low on a benchmark. The setup is checked first, then the edge corrected and benched again.
say_bench(upload("bench-before")["benchChecks"][0])
check = upload("setup-check")["setupChecks"][0]
print(f"\nSetup {good['station']} checked again: {'AGREED' if check['agreed'] else 'NOT AGREED'}")
say_check(check)
say_bench(upload("bench-after")["benchChecks"][0])

# A lot of grade, shot from the good setup.
shots = upload("grade-shots")["gradeChecks"]
summary = call("GET", f"{site}/layers/{layer['name']}/summary")
print(f"\nLayer {summary['layer']}: {summary['verdict'].upper()}")
print(f"  {summary['radio']}")
for reason in summary["reasons"]:
    print(f"  - {reason['text']}")
for shot in shots:
    if shot["verdict"] == "fail":
        point = shot["point"]
        print(f"  {shot['clientId']} {shot['label']} at E {point['easting']:.1f} ft, N {point['northing']:.1f} ft")
