#!/usr/bin/env node
// Stands here, not under dist, so that the command can be linked before the first build.
import './dist/bin.js';
