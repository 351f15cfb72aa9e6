#!/usr/bin/env bash
# A day on a site through the hub's public API. Needs bash, curl, grep and sed:
#
#   HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_... ./walk.sh
#
# Every run makes a project of its own.
set -euo pipefail

: "${HUBTACK_URL:?Set it first; examples/README.md says how.}"
: "${HUBTACK_KEY:?Set it first; examples/README.md says how.}"
hub="${HUBTACK_URL%/}"
data="$(cd "$(dirname "${BASH_SOURCE[0]}")/../data" && pwd)"
started="$(date -u +%Y-%m-%dT%H:%M:%SZ)"

# call METHOD PATH STEP [options of curl]: prints the answer, or says what was wrong and ends.
call() {
  local method="$1" path="$2" step="$3" answer status
  shift 3
  # With such a key a request may be sent again after a broken line: what was done already is not done twice.
  answer="$(curl --silent --show-error --request "$method" "$hub/api/v1$path" \
    --header "Authorization: Bearer $HUBTACK_KEY" --header "Idempotency-Key: $started-$$-$step" \
    --write-out '\n%{http_code}' "$@")" || { echo "$hub does not answer." >&2; exit 1; }
  status="${answer##*$'\n'}"
  answer="${answer%$'\n'*}"
  case "$status" in
    2??) printf '%s\n' "$answer" ;;
    *) stop "$method $path: $status $(word code <<<"$answer"). $(word detail <<<"$answer")" "$answer" ;;
  esac
}

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
feet() { LC_ALL=C printf '%.3f ft' "$(number "$1")"; }
# What stands after the beginning of a list.
after() { sed -E "s/.*\"$1\":\[//"; }

say_setup() {
  local setup
  setup="$(after setups <<<"$1")"
  echo
  echo "Setup $(word station <<<"$setup"): $(word verdict <<<"$setup")"
  echo "  $(word radio <<<"$setup")"
  echo "  E $(feet easting <<<"$setup"), N $(feet northing <<<"$setup"), axis $(feet instrumentElevation <<<"$setup")"
  reasons <<<"$setup" | sed -n '1,3p'
}

say_bench() {
  local check
  check="$(after benchChecks <<<"$1")"
  echo
  echo "Bench check $(word machine <<<"$check"): $(word verdict <<<"$check"), $(feet difference <<<"$check")"
  echo "  $(word instruction <<<"$check")"
}

say_level() {
  local run
  run="$(after levelRuns <<<"$1")"
  echo
  echo "Level run $(word from <<<"$run") to $(word to <<<"$run"): $(word verdict <<<"$run"), misclosure $(feet misclosure <<<"$run")"
  echo "  $(word radio <<<"$run")"
}

# What the office brings in. The control comes as a table: its unit stands in the address.
project="$(send /projects project <<<"{\"name\":\"Thistledown Yard by curl, $started\",\"lengthUnit\":\"ft\",\"frame\":{\"kind\":\"local\"}}")"
site="/projects/$(word id <<<"$project")"
echo "Project: $(word name <<<"$project"), $(word id <<<"$project")"

control="$(call POST "$site/control-points?length=ft" control \
  --header 'Content-Type: text/csv' --data-binary "@$data/control.csv")"
[[ "$control" == *'"refused":[]'* ]] || stop 'Some control was refused:' "$control"
echo "Control: $(number created <<<"$control") points"

instrument="$(file instrument | send "$site/instruments" instrument)"
echo "Instrument: $(word name <<<"$instrument")"

surface="$(file finish | send "$site/surfaces" surface)"
echo "Surface: $(word name <<<"$surface"), $(number points <<<"$surface") points"

layer="$(file layer | sed "s/SURFACE_ID/$(word id <<<"$surface")/" | send "$site/layers" layer)"
echo "Layer: $(word name <<<"$layer"), $(word offsetText <<<"$layer")"

# Both benchmarks are levelled through before anybody leans on them, with a level that was tested that morning.
file level | send "$site/instruments" level >/dev/null
receipt="$(upload level-run)"
say_level "$receipt"

# A setup on four targets in both faces, with a check shot on a benchmark outside the fit.
receipt="$(upload setup-good)"
say_setup "$receipt"
setup="$(after setups <<<"$receipt" | word id)"

# Put in force for the dozer, together with what it is to cut.
release="$(file release | send "$site/setups/$setup/release" release)"
echo "  Released to $(word machine <<<"$release"), offset $(feet offset <<<"$release")"
echo "  $(word radio <<<"$release")"
# `date` counts whole seconds: what follows must not seem older than the release.
sleep 1

# Two setups that must not be used: a forgotten prism constant, and a target that a truck has bumped.
receipt="$(upload setup-wrong-prism)"
say_setup "$receipt"
receipt="$(upload setup-bumped-target)"
say_setup "$receipt"

# The blade reads low on a benchmark. The setup is checked first, then the edge corrected and benched again.
receipt="$(upload bench-before)"
say_bench "$receipt"
receipt="$(upload setup-check)"
echo
echo "Setup checked again: agreed $(after setupChecks <<<"$receipt" | sed -E 's/.*"agreed":([a-z]+).*/\1/')"
receipt="$(upload bench-after)"
say_bench "$receipt"

# A lot of grade, shot from the good setup.
upload grade-shots >/dev/null
summary="$(call GET "$site/layers/subgrade/summary" summary)"
echo
echo "Layer subgrade: $(word verdict <<<"$summary")"
echo "  $(word radio <<<"$summary")"
reasons <<<"$summary"
high="$(call GET "$site/grade-checks?layer=subgrade&verdict=fail" failed)"
grep -oE '"(clientId|label)":"[^"]*"' <<<"$high" | sed -E 's/.*:"(.*)"/\1/' | paste -d ' ' - - | sed 's/^/  /'
