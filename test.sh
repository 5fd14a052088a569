#!/usr/bin/env bash
# Builds everything without warnings and runs every test. Installs from Debian what the tests need.
#   bash test.sh            all tests
#   bash test.sh FILTER     tests whose full name contains FILTER
set -euo pipefail
cd "$(dirname "$0")"
export DOTNET_CLI_TELEMETRY_OPTOUT=1 DOTNET_NOLOGO=1

need() { # need COMMAND PACKAGE
  command -v "$1" >/dev/null 2>&1 && return
  if ! command -v apt-get >/dev/null 2>&1; then
    echo "test.sh: $1 is needed; install Debian's package $2" >&2
    exit 3
  fi
  echo "installing $2 for $1"
  apt-get update -qq >/dev/null
  DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-upgrade "$2" >/dev/null
}
need python3 python3

dotnet build Monitor.sln -c Release -v quiet -clp:NoSummary

results=$(mktemp -d)
trap 'rm -rf "$results"' EXIT
filter=()
[ $# -gt 0 ] && filter=(--filter "FullyQualifiedName~$1")
status=0
dotnet test Monitor.sln -c Release --no-build -m:1 --logger trx --results-directory "$results" "${filter[@]}" || status=$?

# The circuits' hot loops have a path for 256-bit vectors too: the same tests once more without wider ones.
if [ $# -eq 0 ]; then
  DOTNET_EnableAVX512=0 dotnet test tests/Evenhand.Circuits.Tests/Evenhand.Circuits.Tests.csproj -c Release --no-build --filter "FullyQualifiedName~Profiles|FullyQualifiedName~Learning" --logger trx --results-directory "$results" || status=$?
fi

# One plain closing line over all projects, from the counters that the runner wrote.
count() { grep -ho "$1=\"[0-9]*\"" "$results"/*.trx 2>/dev/null | grep -o '[0-9]*' | awk '{ s += $1 } END { print s + 0 }'; }
passed=$(count passed)
failed=$(count failed)
skipped=$(count notExecuted)
if [ "$passed" -eq 0 ] && [ "$failed" -eq 0 ]; then
  echo "test.sh: no test ran" >&2
  status=1
fi
echo "$passed passed, $failed failed, $skipped skipped"
exit "$status"
