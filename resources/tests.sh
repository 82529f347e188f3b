#!/bin/sh
# Sets screenapp up with what its tests need and runs them; words given go on to pytest.
set -eu
. "$(dirname "$0")/setup.sh"
set_up "[test]"
cd "$top"
QT_QPA_PLATFORM=${QT_QPA_PLATFORM:-offscreen} exec "$venv/bin/python" -m pytest "$@"
