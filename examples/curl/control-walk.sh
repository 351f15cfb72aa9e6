#!/usr/bin/env bash
# Proving the ground you stand on, through the hub's public API: where to stand, three setups that lean on the control,
# their network adjusted, and the control that comes of it. Needs bash, curl, grep and sed:
#
#   HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_... ./control-walk.sh
#
# Every run makes a project of its own.
set -euo pipefail

: "${HUBTACK_URL:?Set it first; examples/README.md says how.}"
: "${HUBTACK_KEY:?Set it first; examples/README.md says how.}"
hub="${HUBTACK_URL%/}"
data="$(cd "$(dirname "${BASH_SOURCE[0]}")/../data" && pwd)"
started="$(date -u +%Y-%m-%dT%H:%M:%SZ)"
# Headers of the last answer.
headers="$(mktemp)"
trap 'rm -f "$headers"' EXIT

# call METHOD PATH STEP [options of curl]: prints the answer, or says what was wrong and ends. Paths are as the hub
# itself writes them.
call() {
  local method="$1" path="$2" step="$3" answer status
  shift 3
  # With such a key a request may be sent again after a broken line: what was done already is not done twice.
  answer="$(curl --silent --show-error --request "$method" "$hub$path" --dump-header "$headers" \
    --header "Authorization: Bearer $HUBTACK_KEY" --header "Idempotency-Key: $started-$$-$step" \
    --write-out '\n%{http_code}' "$@")" || { echo "$hub does not answer." >&2; exit 1; }
  status="${answer##*$'\n'}"
  answer="${answer%$'\n'*}"
  case "$status" in
    2??) printf '%s\n' "$answer" ;;
    *) stop "$method $path: $status $(word code <<<"$answer"). $(word detail <<<"$answer")" "$answer" ;;
  esac
}

# header NAME: of the last answer.
header() { tr -d '\r' <"$headers" | grep -i "^$1:" | sed 's/^[^:]*: *//'; }

# send PATH STEP: posts JSON from standard input.
send() { call POST "$@" --header 'Content-Type: application/json' --data-binary @-; }

# A file of examples/data, with the present time where it says NOW.
file() { sed "s/\"NOW\"/\"$(date -u +%Y-%m-%dT%H:%M:%SZ)\"/" "$data/$1.json"; }

# Uploads a file of observations. An item that was refused ends the walk too, though its neighbours are in.
upload() {
  local receipt
  receipt="$(file "$1" | send "$site/uploads" "$1")" || exit 1
  case "$receipt" in
    *'"refused":[]'*) printf '%s\n' "$receipt" ;;
    *) stop "Some of $1 was refused:" "$receipt" ;;
  esac
}

# finish JOB: asks after it until it has ended, no oftener than the hub wants to be asked, and prints what came of it.
finish() {
  local job="$1" at
  at="$(header location)"
  while [[ "$(word status <<<"$job")" =~ ^(queued|running)$ ]]; do
    sleep "$(header retry-after)"
    job="$(call GET "$at" job)" || exit 1
  done
  [[ "$(word status <<<"$job")" == succeeded ]] ||
    stop "Job $(word id <<<"$job") $(word status <<<"$job"): $(word code <<<"$job"). $(word detail <<<"$job")" "$job"
  call GET "$(word result <<<"$job")" result
}

# every PATH: the pages of a list, one a line.
every() {
  local page cursor=''
  while page="$(call GET "$1&limit=200$cursor" page)" || exit 1; do
    printf '%s\n' "$page"
    cursor="$(word nextCursor <<<"$page")" || break
    cursor="&cursor=$cursor"
  done
}

# stop WORDS ANSWER: ends with the words, and with every error that the answer lists.
stop() {
  local text='"([^"\\]|\\.)*"'
  echo "$1" >&2
  { grep -oE "\"pointer\":$text,\"code\":$text,\"detail\":$text,\"fix\":$text" <<<"$2" || true; } |
    sed -E 's/"pointer":"(.*)","code":"(.*)","detail":"(.*)","fix":"(.*)"/  \1 (\2): \3 \4/' >&2
  exit 1
}

# The first value of a name, and the texts of the reasons. Enough for a shell; a program parses the JSON.
word() { grep -oE "\"$1\":\"([^\"\\]|\\\\.)*\"" | sed -nE "1s/^\"$1\":\"(.*)\"\$/\1/p"; }
number() { grep -oE "\"$1\":[-+0-9.eE]+" | sed -n '1s/.*://p'; }
reasons() { sed -E 's/.*"reasons":\[([^]]*)\].*/\1/' | grep -oE '"text":"[^"]*"' | sed -E 's/"text":"(.*)"/  - \1/'; }
decimals() { LC_ALL=C printf "%.$1f" "$(number "$2")"; }
feet() { echo "$(decimals 3 "$1") ft"; }
upper() { word "$1" | tr '[:lower:]' '[:upper:]'; }
# What stands after the beginning of a list or of an object.
after() { sed -E "s/.*\"$1\":[[{]//"; }

# say_setup RECEIPT HOW
say_setup() {
  local setup
  setup="$(after setups <<<"$1")"
  echo
  echo "Setup $(word station <<<"$setup") $2: $(upper verdict <<<"$setup")"
  echo "  $(word radio <<<"$setup")"
  echo "  E $(feet easting <<<"$setup"), N $(feet northing <<<"$setup"), good to $(feet semiMajor <<<"$setup") at 95 %"
  reasons <<<"$setup" | sed -n '1,3p'
}

# The control as it was published, the instruments, and the benchmarks levelled through.
project="$(send /api/v1/projects project <<<"{\"name\":\"Thistledown Yard control by curl, $started\",\"lengthUnit\":\"ft\",\"frame\":{\"kind\":\"local\"}}")"
site="/api/v1/projects/$(word id <<<"$project")"
echo "Project: $(word name <<<"$project"), $(word id <<<"$project")"
control="$(file control | send "$site/control-points" control)"
[[ "$control" == *'"refused":[]'* ]] || stop 'Some control was refused:' "$control"
echo "Control: $(number created <<<"$control") points"
file instrument | send "$site/instruments" station >/dev/null
file level | send "$site/instruments" level >/dev/null
run="$(upload level-run)"
run="$(after levelRuns <<<"$run")"
echo "Level run $(word from <<<"$run") to $(word to <<<"$run"): $(upper verdict <<<"$run"), misclosure $(feet misclosure <<<"$run")"

# Where to stand, before anybody walks there.
forecast="$(file setup-forecast | send "$site/setup-forecasts" forecast)"
echo
echo "Forecast: $(word summary <<<"$forecast")"

# Over the gate's benchmark; then on the pad by angles alone, and by shots of which nobody named the targets.
receipt="$(upload setup-backsight)"
say_setup "$receipt" "over $(after occupied <<<"$receipt" | word point) by backsights"
receipt="$(upload setup-angles-only)"
say_setup "$receipt" 'by angles alone'
receipt="$(upload setup-identify)"
say_setup "$receipt" "by $(number matched <<<"$receipt") of $(number reflectors <<<"$receipt") reflectors identified"

# What all of them together say of one mark.
mark="$site/control-points/HT-103"
before="$(call GET "$mark" before)"
echo
echo "Control $(word name <<<"$before"), version $(number version <<<"$before"): $(after health <<<"$before" | upper finding)"
echo "  $(after health <<<"$before" | word text)"

# All of it in one network. It takes longer than a request: the hub answers with a job.
job="$(file adjustment | send "$site/adjustments" adjustment)"
adjustment="$(finish "$job")"
at="$site/adjustments/$(word id <<<"$adjustment")"
verdict="$(word verdict <<<"$adjustment")"
echo
echo "Adjustment \"$(word name <<<"$adjustment")\": $(upper verdict <<<"$adjustment"), sigma0 $(decimals 2 sigma0 <<<"$adjustment")"
reasons <<<"$adjustment"
# Each observation up to its w, if anything else controls it, with the size of that before it; the largest first.
worst="$(every "$at/observations?removed=false" |
  { grep -oE '"kind":"[^"]*","setupId":[^{}]*"standardised":[-0-9][-+0-9.eE]*' || true; } |
  sed -E 's/(.*"standardised":-?)(.*)/\2 \1\2/' | LC_ALL=C sort -rg | sed -n 1p)"
if [[ -n "$worst" ]]; then
  what="$(grep -oE '"(kind|setup|levelRun|to|component)":"[^"]*"' <<<"$worst" | sed -E 's/.*:"(.*)"/\1/' | paste -s -d ' ' -)"
  echo "  Worst residual: $what, $(decimals 3 residual <<<"$worst") $(word unit <<<"$worst"), w $(decimals 2 standardised <<<"$worst")"
fi

# A trial run until somebody applies it: a pass may be, a hold by another person with a note, a fail never.
case "$verdict" in
  pass)
    applied="$(send "$at/apply" apply <<<'{}')"
    echo "  Applied: $(grep -oE '"version":' <<<"$applied" | grep -c .) points have a new version"
    now="$(call GET "$mark" after)"
    echo "  $(word name <<<"$now"), version $(number version <<<"$now"): E $(feet easting <<<"$now"), N $(feet northing <<<"$now"), elevation $(feet elevation <<<"$now")"
    echo "  sigma in plan $(feet horizontal <<<"$now"), was $(feet horizontal <<<"$before")"
    ;;
  hold) echo '  Not applied: on hold, another person applies it with a note.' ;;
  fail) echo '  Not applied: a fail stays a trial run.' ;;
esac
