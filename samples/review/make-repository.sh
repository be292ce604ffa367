#!/bin/sh
# Builds a repository of edits to review from the samples beside this script. Usage: make-repository.sh FOLDER
set -eu
if [ $# -ne 1 ]; then
    echo "usage: make-repository.sh FOLDER" >&2
    exit 64
fi
samples=$(CDPATH= cd -- "$(dirname -- "$0")/.." && pwd)
if [ -e "$1" ]; then
    echo "$1 is there already; name a folder that is not" >&2
    exit 1
fi
mkdir -p "$1"
cd "$1"
cp "$samples"/*.drive .
cp -R "$samples"/library .

day=1
git() {
    command git -c user.name="R. Falk" -c user.email=falk@example.org -c commit.gpgsign=false \
        -c core.autocrlf=false -c init.defaultBranch=main "$@"
}
# commit SUBJECT: every commit has a day of its own, so that the repository is the same whenever it is built
commit() {
    stamp=$(printf '2026-09-%02dT10:00:00+0000' "$day")
    day=$((day + 1))
    git add -A
    GIT_AUTHOR_DATE=$stamp GIT_COMMITTER_DATE=$stamp git commit -q -m "$1"
}
# edit FILE FROM TO: replaces the first line that holds FROM; it is an error when none does
edit() {
    if ! grep -q -- "$2" "$1"; then
        echo "make-repository.sh: no line with \"$2\" in $1" >&2
        exit 1
    fi
    sed "s|$2|$3|" "$1" > "$1.part"
    mv "$1.part" "$1"
}

git init -q
commit "Drives as signed in August"

# ---- edits of a drive that the classic method rates

edit water_wheel.drive 'power          = 7.5 kW  ' 'power          = 9.0 kW  '
commit "Generator contract raised to 9 kW"

edit water_wheel.drive 'face_width     = 75 mm     because.*' 'face_width     = 90 mm     because "wider after the contract was raised"'
edit water_wheel.drive 'service_factor = 1.25' 'service_factor = 1.10'
edit water_wheel.drive 'wear >= 1.0' 'wear >= 0.9'
commit "Mill: wider face for the new load"

git mv water_wheel.drive mill_wheel.drive
edit mill_wheel.drive 'drive water_wheel ' 'drive mill_wheel '
commit "Mill: name of the file and the drive as in the drawings"

# ---- the exercises

edit beet_washer.drive 'power              = 30 kW ' 'power              = 37 kW '
commit "Beet washer: motor of 37 kW, frame 225"

edit beet_washer.drive 'power              = 37 kW ' 'power              = 30 kW '
edit beet_washer.drive 'long_life_factor = 0.85     because.*' 'long_life_factor = 1.0      because "proven in two campaigns"'
commit "Beet washer: back to 30 kW; long-life factor after two campaigns"

edit beet_washer.drive 'until 2027-10-31' 'until 2029-10-31'
commit "Beet washer: acceptance prolonged"

edit clinker_elevator.drive 'normal_module        = 4 mm' 'normal_module        = 4.5 mm'
edit clinker_elevator.drive '    face_width           = 56 mm' '    face_width           = 65 mm'
edit clinker_elevator.drive '      face_width          = 58 mm' '      face_width          = 67 mm'
commit "Clinker elevator: second stage of module 4.5"

edit transfer_car.drive '    face_width            = 23 mm     because.*' '    face_width            = 26 mm'
commit "Transfer car: wider face"

edit transfer_car.drive '      hand              = left' '      hand              = right'
commit "Transfer car: pinion of the other hand"

edit dryer_cylinder.drive 'accuracy             = 7 ISO1328 ' 'accuracy             = 6 ISO1328 '
commit "Dryer cylinder: class 6 after regrinding"

edit carton_indexer.drive 'power              = 4.0 kW ' 'power              = 5.364 hp '
commit "Carton indexer: power as on the American data sheet"

edit library/case-hardening-steels.drive 'quality          = MQ                   per "Marrowby Steel, quality agreement QA-18, issue 4"' \
    'quality          = ML                   per "Marrowby Steel, delivery without ultrasonic test"'
commit "Library: 18CrNiMo7-6 now ordered as ML"
