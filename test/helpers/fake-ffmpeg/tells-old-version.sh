#!/bin/sh
echo "ffmpeg version N-12345-gabcdef Copyright (c) 2000-2018 the FFmpeg developers"
echo "libavformat    58. 24.100 / 58. 24.100"
