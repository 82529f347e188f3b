#!/bin/sh
# Sets screenapp up if need be and starts it with the words given:
#   sh resources/start.sh                                   opens the window
#   sh resources/start.sh screen samples/NAME.part.json     screens a part with no window
set -eu
. "$(dirname "$0")/setup.sh"
set_up ""
exec "$venv/bin/python" -m screenapp "$@"
