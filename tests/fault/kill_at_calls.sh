#!/bin/sh
# kill_at_calls.sh DRIVER: an import is killed at, or refused, every write, sync and unlink that it
# makes, by strace's injection; after each the database holds the earlier import and all of the new
# one or none of it, and an acknowledged import is there. Exit 77 (skipped) where strace may not.
# PF_FAULT_FULL set: also every call of laying out a new database, and errors beside kills.
set -u
driver=$1
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
cd "$folder" || exit 1

if ! strace -o /dev/null true 2>/dev/null; then
    echo "skipped: strace may not trace here"
    exit 77
fi
"$driver" import good.db 1 >/dev/null || exit 1
tries=0
hot=0

# one INJECTION DB-before: runs the import of tag 2 under the injection; 0 while the call was reached
one() {
    rm -f team.db team.db-journal
    [ -z "$2" ] || cp "$2" team.db
    strace -f -o trace -e trace="$3" -e inject="$3:$1" "$driver" import team.db 2 >number 2>message
    status=$?
    tries=$((tries + 1))
    [ -e team.db-journal ] && hot=$((hot + 1))
    reached=0
    grep -q -e INJECTED -e 'killed by SIGKILL' trace || reached=1
    if [ -n "$2" ] || [ -s number ]; then
        if ! "$driver" check team.db >tags 2>why; then
            echo "$3 $1: $(cat why)"
            exit 1
        fi
        if [ -n "$2" ] && ! grep -qx 1 tags; then
            echo "$3 $1: the earlier import is gone"
            exit 1
        fi
        if [ -s number ] && ! grep -qx 2 tags; then
            echo "$3 $1: an acknowledged import is gone"
            exit 1
        fi
        if [ $status -eq 4 ] && { [ ! -s message ] ||
            { grep -qx 2 tags && ! grep -q 'is stored, but' message; }; }; then
            echo "$3 $1: refused, but stored or without a word: $(cat message)"
            exit 1
        fi
    fi
    return $reached
}

# every CALL INJECTION DB-before: the injection at the first call of this kind, the second, …
every() {
    n=1
    while one "$2:when=$n" "$3" "$1"; do
        n=$((n + 1))
    done
    echo "$1 $2: $((n - 1)) calls"
    [ $n -gt 1 ] || [ "$4" = rare ] || exit 1
}

for call in pwrite64 fdatasync,fsync unlink; do
    every "$call" signal=KILL good.db often
done
if [ -n "${PF_FAULT_FULL-}" ]; then
    for call in pwrite64 fdatasync,fsync unlink; do
        every "$call" signal=KILL "" often
        every "$call" error=EIO good.db often
    done
    every pwrite64 error=ENOSPC good.db often
    every openat signal=KILL good.db often
    every ftruncate signal=KILL good.db rare
fi
echo "$tries runs, $hot left a journal"
