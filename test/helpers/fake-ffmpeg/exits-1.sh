#!/bin/sh
echo "[info] first words" >&2
echo "[error] clip.mp4: nothing good in here" >&2
exit 1
