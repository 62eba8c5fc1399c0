#!/bin/sh
# Four megabytes of complaints in one line, then 100000 short ones, then a good end.
head -c 4000000 /dev/zero | tr '\0' 'x' >&2
yes '[error] again and again' | head -n 100000 >&2
exit 0
