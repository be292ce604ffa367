#!/usr/bin/env bash
# Tries the server in real editors, each on a copy of a sample. Uses what is there: NVIM and EMACS name the programs.
#   editor-config/try/run.sh [nvim] [emacs]
set -euo pipefail
here=$(cd "$(dirname "$0")" && pwd)
home=$(cd "$here/../.." && pwd)
export BACKCONE=$home/backcone
"$BACKCONE" --version >/dev/null
status=0
for editor in "${@:-nvim emacs}"; do
    work=$(mktemp -d)
    cp -r "$home"/samples/*.drive "$home"/samples/library "$work"
    export SPEC=$work/clinker_elevator.drive
    case $editor in
        nvim) timeout 300 "${NVIM:-nvim}" --headless -u NONE -i NONE -n -l "$here/nvim.lua" || status=1 ;;
        emacs) timeout 300 "${EMACS:-emacs}" -q --batch -l "$here/eglot.el" || status=1 ;;
        *) echo "no such editor: $editor" >&2; exit 64 ;;
    esac
    rm -rf "$work"
done
exit $status
