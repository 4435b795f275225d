# Makes a compiler for wasm32-unknown-unknown out of Debian's packages, for a machine where rustup cannot add that target.
#
#   bash wasm-toolchain.sh DIR
#
# DIR is where it is kept: DIR/bin/rustc is the compiler, Debian's cargo drives it. It is made once, used as it stands
# afterwards, and made anew when Debian's compiler changes.
set -euo pipefail
DIR=$1
WASM=wasm32-unknown-unknown

packages=(rustc-web cargo-web rust-web-src lld-22)
if ! dpkg-query -W -f '${Status}\n' "${packages[@]}" 2>/dev/null | grep -c '^install ok installed$' | grep -qx "${#packages[@]}"; then
  if [ "$(id -u)" != 0 ]; then
    echo "the packages ${packages[*]} are missing; install them as root: apt-get install --no-install-recommends ${packages[*]}" >&2
    exit 1
  fi
  export DEBIAN_FRONTEND=noninteractive
  apt-get update -qq </dev/null >&2
  apt-get install -y -qq --no-install-recommends "${packages[@]}" </dev/null >&2
fi

# The second line is the version of this recipe.
stamp="$(/usr/bin/rustc -vV)
recipe 1"
if [ "$(cat "$DIR/stamp" 2>/dev/null || true)" != "$stamp" ]; then
  echo "building the standard library for $WASM (once, about a minute) ..." >&2
  host=$(/usr/bin/rustc -vV | sed -n 's/^host: //p')
  rm -rf "$DIR"
  mkdir -p "$DIR/bin" "$DIR/lib/rustlib/$WASM/lib" "$DIR/seed/src"
  for tool in rustc rustdoc; do
    printf '#!/bin/sh\nexec /usr/bin/%s --sysroot "%s" "$@"\n' "$tool" "$DIR" > "$DIR/bin/$tool"
    chmod +x "$DIR/bin/$tool"
  done
  for part in etc src "$host"; do
    ln -s "/usr/lib/rustlib/$part" "$DIR/lib/rustlib/"
  done

  # A crate with nothing in it, whose only use is that cargo builds the standard library for it. The libraries can be
  # linked with and without link-time optimisation because they carry bitcode.
  cat > "$DIR/seed/Cargo.toml" <<'SEED'
[package]
name = "seed"
version = "0.0.0"
edition = "2024"
[workspace]
[profile.release]
lto = "off"
codegen-units = 1
debug = false
SEED
  echo '#![no_std]' > "$DIR/seed/src/lib.rs"
  (
    cd "$DIR/seed"
    env -u RUSTUP_TOOLCHAIN -u CARGO -u CARGO_ENCODED_RUSTFLAGS \
      RUSTC=/usr/bin/rustc RUSTC_BOOTSTRAP=1 \
      RUSTFLAGS='-Cembed-bitcode=yes -Zforce-unstable-if-unmarked' CARGO_TARGET_DIR="$DIR/seed/target" \
      /usr/bin/cargo build --offline --release --quiet \
      --config 'source.crates-io.replace-with="std-vendor"' \
      --config 'source.std-vendor.directory="/usr/lib/rustlib/src/rust/library/vendor"' \
      --target "$WASM" -Zbuild-std=std,panic_abort,panic_unwind,test </dev/null >&2
  )
  find "$DIR/seed/target/$WASM/release/deps" -name 'lib*.rlib' ! -name 'libseed*' \
    -exec cp {} "$DIR/lib/rustlib/$WASM/lib/" \;
  rm -rf "$DIR/seed"
  printf '%s\n' "$stamp" > "$DIR/stamp"
fi
