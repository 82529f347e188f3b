# Sets up screenapp in the folder's own virtual environment.  Sourced by start.sh and tests.sh.
#
# usage: . resources/setup.sh; set_up EXTRA      (EXTRA: "" or "[test]")
#
# On Debian and its kin missing system libraries, venv support and a text font are installed through
# apt, if the user is root or has sudo.  Elsewhere it says what is missing and goes on.

top=$(cd "$(dirname "$0")/.." && pwd)
venv=${SCREENAPP_VENV:-$top/.venv}
packages=""

say() { printf 'set-up: %s\n' "$*" >&2; }

# wants LIBRARY PACKAGE: note PACKAGE as missing unless the dynamic linker knows LIBRARY
wants() {
    case "$known" in *"$1"*) ;; *) packages="$packages $2" ;; esac
}

find_python() {
    for candidate in "${PYTHON:-}" python3 python3.13 python3.12 python3.11; do
        [ -n "$candidate" ] || continue
        if "$candidate" -c 'import sys; sys.exit(sys.version_info < (3, 11))' 2>/dev/null; then
            python=$candidate
            return 0
        fi
    done
    say "screenapp needs Python 3.11 or newer and found none"
    say "install it (on Debian 12: apt-get install python3), or name one: PYTHON=/path/to/python3"
    exit 4
}

find_missing() {
    known=$( (/sbin/ldconfig -p || ldconfig -p) 2>/dev/null || true)
    [ -n "$known" ] || return 0
    wants libGL.so.1 libgl1
    wants libGLU.so.1 libglu1-mesa
    wants libEGL.so.1 libegl1
    wants libX11.so.6 libx11-6
    wants libXft.so.2 libxft2
    wants libXcursor.so.1 libxcursor1
    wants libXinerama.so.1 libxinerama1
    wants libXfixes.so.3 libxfixes3
    wants libXrender.so.1 libxrender1
    wants libfontconfig.so.1 libfontconfig1
    wants libfreetype.so.6 libfreetype6
    wants libgomp.so.1 libgomp1
    wants libglib-2.0.so.0 libglib2.0-0
    wants libdbus-1.so.3 libdbus-1-3
    wants libxkbcommon.so.0 libxkbcommon0
    wants libxkbcommon-x11.so.0 libxkbcommon-x11-0
    wants libxcb-cursor.so.0 libxcb-cursor0
    wants libxcb-icccm.so.4 libxcb-icccm4
    wants libxcb-image.so.0 libxcb-image0
    wants libxcb-keysyms.so.1 libxcb-keysyms1
    wants libxcb-randr.so.0 libxcb-randr0
    wants libxcb-render-util.so.0 libxcb-render-util0
    wants libxcb-shape.so.0 libxcb-shape0
    wants libxcb-xinerama.so.0 libxcb-xinerama0
    wants libxcb-xkb.so.1 libxcb-xkb1
    if [ -z "$(find /usr/share/fonts /usr/local/share/fonts "$HOME/.fonts" "$HOME/.local/share/fonts" \
        \( -name '*.ttf' -o -name '*.otf' \) 2>/dev/null | head -n 1)" ]; then
        packages="$packages fonts-dejavu-core fontconfig"
    fi
    if ! "$python" -c 'import ensurepip, venv' 2>/dev/null; then
        packages="$packages python3-venv"
    fi
}

install_missing() {
    [ -n "$packages" ] || return 0
    as_root=""
    if [ "$(id -u)" -ne 0 ]; then
        if command -v sudo >/dev/null 2>&1; then as_root="sudo"; else as_root="none"; fi
    fi
    if ! command -v apt-get >/dev/null 2>&1 || [ "$as_root" = none ]; then
        say "these system packages (Debian names) seem to be missing:$packages"
        say "install them with your package manager if the next steps fail"
        return 0
    fi
    say "installing system packages:$packages"
    $as_root apt-get update -qq >&2
    # shellcheck disable=SC2086  # a list of words
    DEBIAN_FRONTEND=noninteractive $as_root apt-get install -y -qq --no-install-recommends \
        $packages >&2
}

set_up() {
    extra=$1
    find_python
    stamp="$venv/.set-up$extra"
    wanted=$(cksum "$top/pyproject.toml")
    if [ -x "$venv/bin/python" ] && [ "$(cat "$stamp" 2>/dev/null)" = "$wanted" ]; then
        return 0
    fi
    find_missing
    install_missing
    if [ ! -x "$venv/bin/python" ]; then
        say "making a virtual environment in $venv"
        "$python" -m venv "$venv"
    fi
    say "installing screenapp and what it needs (a few minutes the first time)"
    "$venv/bin/python" -m pip install --quiet --disable-pip-version-check -e "$top$extra" >&2
    printf '%s\n' "$wanted" >"$stamp"
}
