#!/bin/sh
# The real one, whose output is also kept for stalls-mid-way.
"$REAL_FFMPEG" "$@" | tee "$RECORDING"
