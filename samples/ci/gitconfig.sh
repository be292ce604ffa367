#!/bin/sh
# Settings for one clone: the block in hunk headers, margins in `git log -p`. Run it once in the clone.
# Without --margins, diffs show the text alone.
set -e
git config diff.backcone.xfuncname '^[ \t]*((drive|variant|family|case|spectrum|shaft|bevel|cylindrical|gear|pinion|wheel|rate|material|lubricant|bearing|kind|chapter|method|table)[ \t].*)$'
if [ "$1" = "--margins" ]; then
    git config diff.backcone.textconv 'backcone ledger --textconv'
    git config diff.backcone.cachetextconv false
fi
