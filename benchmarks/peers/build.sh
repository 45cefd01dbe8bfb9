#!/bin/sh
# Builds the peers into out/ beside this script. Packages: see README.md.
cd "$(dirname "$0")" || exit 1
mkdir -p out
missing=0

need() { # need FILE PACKAGE
  [ -e "$1" ] && return 0
  echo "build.sh: $1 is missing: apt-get install $2" >&2
  missing=1
  return 1
}
compile() { # compile NAME LIBRARIES...
  name=$1
  shift
  echo "building $name"
  g++ -std=c++17 -O3 -march=native -DNDEBUG -o "out/$name" "$name.cpp" "$@" || missing=1
}

command -v g++ >/dev/null || { echo 'build.sh: no g++: apt-get install g++' >&2; exit 1; }
library=/usr/lib/$(g++ -dumpmachine)
[ -e "$library" ] || library=/usr/lib/x86_64-linux-gnu

need "$library/libopenblas.so.0" libopenblas0-pthread
need /usr/include/suitesparse/cholmod.h libsuitesparse-dev && compile cholmod -lcholmod -ldl
need "$library/libdmumps_seq.so" libmumps-seq-dev && compile mumps -I/usr/include/mumps_seq -ldmumps_seq
need /usr/include/CGAL/Delaunay_mesher_2.h libcgal-dev && compile cgal -lgmp -lmpfr
if ! /usr/bin/python3 -c 'import dolfin, petsc4py' 2>/dev/null; then
  echo 'build.sh: python3 has no dolfin with petsc4py: apt-get install python3-dolfin python3-petsc4py' >&2
  missing=1
fi
exit $missing
