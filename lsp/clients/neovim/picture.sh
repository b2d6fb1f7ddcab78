#!/usr/bin/env bash
# Makes ../hover.png: Neovim in a terminal, with the hover on a device of a demo
# deck, taken from a screen that only exists in memory. Debian packages: neovim
# xvfb xterm imagemagick fonts-dejavu-core.
set -euo pipefail
cd "$(dirname "$0")/../../.."

work=$(mktemp -d)
pids=()
trap 'kill "${pids[@]}" 2>/dev/null || true; rm -rf "$work"' EXIT
go build -o "$work/triodeck" ./cmd/triodeck

export DECK=testdata/demo/sampler_nmos.sp AT='^M_sw' READY=$work/ready DISPLAY=:71
Xvfb "$DISPLAY" -screen 0 1168x529x24 >/dev/null 2>&1 &
pids+=($!)
until [ -S /tmp/.X11-unix/X71 ]; do sleep 0.1; done

export HOME=$work XDG_CONFIG_HOME=$work XDG_DATA_HOME=$work XDG_STATE_HOME=$work XDG_CACHE_HOME=$work
xterm -u8 -fa "DejaVu Sans Mono" -fs 11 -geometry 128x27+0+0 -b 8 -bw 0 -bg '#fbfaf7' -fg '#1f2933' -xrm 'XTerm*scrollBar: false' -e \
  nvim --clean -n --cmd "lua vim.g.triodeck = { cmd = { '$work/triodeck', 'lsp' } }" \
  -c "luafile lsp/clients/neovim/triodeck.lua" -c "luafile lsp/clients/neovim/picture.lua" &
pids+=($!)
for _ in $(seq 100); do [ -e "$READY" ] && break; sleep 0.2; done
[ -e "$READY" ] || { echo "the hover was not shown" >&2; exit 1; }
sleep 1 # for the terminal to paint
import -window root "$work/hover.png"
convert "$work/hover.png" +dither -colors 64 -strip "${1:-lsp/clients/hover.png}"
