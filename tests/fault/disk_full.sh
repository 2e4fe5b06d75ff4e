#!/bin/sh
# disk_full.sh DRIVER: imports onto a disk of 2 MB until it is full: a clear error, exit 4, and every
# import that was acknowledged, no part of another. Exit 77 (skipped) where mounting is not allowed;
# test_store_health makes the same claim with a limit on the pages of the file.
set -u
driver=$1
folder=$(mktemp -d)
if ! mount -t tmpfs -o size=2m none "$folder" 2>/dev/null; then
    rmdir "$folder"
    echo "skipped: no file system may be mounted here"
    exit 77
fi
trap 'cd /; umount "$folder"; rmdir "$folder"' EXIT
cd "$folder" || exit 1

# Something else takes most of the disk, so that a few imports fill the rest.
head -c 1800000 /dev/zero >ballast
tag=0
while [ $tag -lt 60 ] && "$driver" import team.db $tag >/dev/null 2>message; do
    tag=$((tag + 1))
done
"$driver" import team.db $tag >/dev/null 2>message
status=$?
if [ $status -ne 4 ] || ! grep -q 'the disk is full; nothing was stored' message; then
    echo "exit $status after $tag imports: $(cat message)"
    exit 1
fi
rm ballast
"$driver" check team.db >tags || exit 1
if [ "$(wc -l <tags)" -ne $tag ]; then
    echo "$tag imports were acknowledged, $(wc -l <tags) are there"
    exit 1
fi
echo "full after $tag imports, all of them whole"
