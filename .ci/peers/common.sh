# What the peer measurements share; sourced at the root of the work tree.
threads=2
python=/usr/bin/python3 # the one that python3-scipy belongs to
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
export OMP_NUM_THREADS=$threads OPENBLAS_NUM_THREADS=$threads XDG_STATE_HOME=$work
export PYTHONPATH=.ci/peers PYTHONDONTWRITEBYTECODE=1
busy=$(cut -d' ' -f1-3 /proc/loadavg)

# machine prints the line that dates a table.
machine() {
  printf '%s, %s, %s cores, %s threads, load before %s\n' "$(date -u +%Y-%m-%d)" \
    "$(grep -m1 'model name' /proc/cpuinfo | cut -d: -f2- | xargs)" "$(nproc)" "$threads" "$busy"
}

# version prints the version of a Debian package.
version() { dpkg-query -W -f '${Version}' "$1"; }

build_dwindle() { go build -o "$work/dwindle" ./cmd/dwindle; }
build_eigen() {
  g++ -O3 -march=native -DNDEBUG -fopenmp -I/usr/include/eigen3 ".ci/peers/$1.cpp" -o "$work/$1"
}

# dwindle SYSTEM PAIRING [OPTION...] solves to 1e-8 and prints, as the peers do:
# seconds of the set-up, seconds of the solve, iterations, fill, true relative
# residual. The command in watch, if any, runs it.
watch=()
dwindle() {
  "${watch[@]}" "$work/dwindle" run "$1" --pair "$2" --tol 1e-8 --seconds 0 --threads $threads "${@:3}" \
    --as json >"$work/out.json" 2>"$work/err" || { cat "$work/err" >&2; return 1; }
  $python - "$work/out.json" <<'PY'
import json, sys
t = json.load(open(sys.argv[1]))["trials"][0]
setup = t["setup_seconds"]
print(setup, t["own_seconds"] - setup, t["iterations"], t["build"]["fill"], t["true_residual"])
PY
}

# note LABEL COMMAND... runs one peer once and keeps what it prints, in one line
# with its label.
note() {
  local label=$1 result
  shift
  result=$("$@") || return
  echo "$label" $result >>"$work/log"
  echo "$label" $result >&2
}
