# What the project needs from Debian, and how it comes. Sourced by demo and test.
# shellcheck shell=sh

# To build and run; then what the tests add; then what `make check` adds.
export BUILD_PACKAGES="gcc libc6-dev make pkg-config zlib1g-dev liblzma-dev libzstd-dev
	libsqlite3-dev libjansson-dev libinih-dev libdivsufsort-dev libmd-dev
	librandom123-dev"
export FETCH_PACKAGES="ca-certificates unzip zstd gzip libreadline8"
export TEST_PACKAGES="libcmocka-dev python3 sqlite3"
export CHECK_PACKAGES="clang libclang-rt-14-dev clang-format cppcheck valgrind
	shellcheck man-db xz-utils zstd"

# Prints the packages of the list that are not installed.
missing_packages() {
	for package in "$@"; do
		state=$(dpkg-query -W -f '${db:Status-Status}' "$package" 2>/dev/null) || true
		[ "$state" = installed ] || printf '%s ' "$package"
	done
}

# install_words SUDO PACKAGE...
install_words() {
	sudo=$1
	shift
	$sudo apt-get update -qq &&
		$sudo apt-get install -y -qq --no-install-recommends "$@"
}

# need PACKAGE...: installs what is missing as root or by sudo, or prints the
# line to run and ends with exit code 2.
need() {
	if ! command -v dpkg-query >/dev/null 2>&1; then
		echo "This is no Debian system; what is needed: $*" >&2
		return 0
	fi
	missing=$(missing_packages "$@")
	[ -n "$missing" ] || return 0
	if [ "$(id -u)" -eq 0 ]; then
		as_root=
	elif command -v sudo >/dev/null 2>&1 && sudo -n true 2>/dev/null; then
		as_root=sudo
	else
		echo "Some packages are missing, and installing needs root. Run:" >&2
		echo "  apt-get install -y --no-install-recommends $missing" >&2
		exit 2
	fi
	echo "installing: $missing" >&2
	export DEBIAN_FRONTEND=noninteractive
	talk=$(mktemp)
	# The words are packages: they must split.
	# shellcheck disable=SC2086
	if ! install_words "$as_root" $missing >"$talk" 2>&1; then
		tail -n 20 "$talk" >&2
		rm -f "$talk"
		echo "Installing failed. Offline? What is missing: $missing" >&2
		exit 2
	fi
	rm -f "$talk"
}
