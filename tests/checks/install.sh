#!/bin/sh
# make install into a staging root; a program of another project builds against it with pkg-config and runs; uninstall leaves nothing.
set -u
build=$1
case $build in *san-* | *cov*) echo "ok skipped: installed from the release flavour only"; exit 0 ;; esac
root=$(mktemp -d)
trap 'rm -rf "$root"' EXIT
make --no-print-directory install CC="$CC" DESTDIR="$root" PREFIX=/opt/mw >/dev/null 2>"$root/log" || { cat "$root/log"; echo "not ok make install"; exit 1; }
echo "ok make install"
cat >"$root/use.c" <<'C'
#include <stdio.h>
#include <meltwright/rosenthal.h>
#include <meltwright/version.h>
int main(void)
{
    /* Check row B2-1: 70 W absorbed, 0.8 m/s, k 26.9, rho c 6881*790, rise 1430 K -> 99.963543 um (exact mathematics). */
    const mw_source s = {70, 0.8, 20e-6};
    const mw_medium m = {26.9, 6881.0 * 790.0, 300, 1730};
    mw_pool p;
    const mw_status status = mw_rosenthal_pool(&s, &m, &p);
    printf("%s %.6f\n", mw_version(), 1e6 * p.width_m);
    return status != MW_OK;
}
C
version=$(sed -n 's/^#define MW_VERSION "\(.*\)"/\1/p' include/meltwright/version.h)
export PKG_CONFIG_PATH="$root/opt/mw/lib/pkgconfig" PKG_CONFIG_SYSROOT_DIR="$root"
if "$CC" $(pkg-config --cflags meltwright) "$root/use.c" -o "$root/use" $(pkg-config --libs meltwright) 2>"$root/log" &&
    [ "$(LD_LIBRARY_PATH=$root/opt/mw/lib "$root/use")" = "$version 99.963543" ]; then
    echo "ok a program builds against the installed library with pkg-config"
else
    cat "$root/log"
    echo "not ok a program builds against the installed library with pkg-config"
fi
[ "$(pkg-config --modversion meltwright)" = "$version" ] && echo "ok pkg-config version" || echo "not ok pkg-config version"
if "$root/opt/mw/bin/meltwright" card show 316L >/dev/null 2>"$root/log"; then
    echo "ok the installed program finds the installed cards"
else
    cat "$root/log"
    echo "not ok the installed program finds the installed cards"
fi
make --no-print-directory uninstall DESTDIR="$root" PREFIX=/opt/mw >/dev/null
left=$(find "$root/opt" -type f -o -type l)
[ -z "$left" ] && echo "ok make uninstall" || echo "not ok make uninstall leaves $left"
