#!/bin/sh
# Rebuilds the demo papers from the sources in this folder. Needs groff,
# LibreOffice Writer, Chromium, poppler-utils (pdftoppm);
# the built papers are kept in the repository, so that only a
# change of a source needs these programs.
set -eu
cd "$(dirname "$0")"
out=..
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
for program in groff soffice chromium pdftoppm; do
	command -v "$program" >/dev/null || { echo "build.sh: $program is not installed" >&2; exit 1; }
done
print_page() { # source, PDF
	chromium --headless --no-sandbox --disable-gpu --disable-background-networking --disable-sync --no-first-run \
		--user-data-dir="$work/profile" --no-pdf-header-footer --print-to-pdf="$2" "file://$PWD/$1" 2>/dev/null
}
groff -ms -t -k -Tpdf syrup-feeding.ms >"$out/syrup-feeding.pdf"
soffice --headless -env:UserInstallation="file://$work/office" --infilter="HTML (StarWriter)" \
	--convert-to pdf:writer_pdf_Export --outdir "$work" pollen-patties.html >/dev/null 2>&1
mv "$work/pollen-patties.pdf" "$out/"
print_page homing-flights.html "$out/homing-flights.pdf"
print_page scanned-notes.html "$work/notes.pdf"
pdftoppm -r 60 -gray -png -singlefile "$work/notes.pdf" "$work/notes"
printf '<style>@page{size:A5;margin:0}body{margin:0}</style><img style="width:100%%" src="%s">' "$work/notes.png" >"$work/scan.html"
chromium --headless --no-sandbox --disable-gpu --disable-background-networking --disable-sync --no-first-run \
	--user-data-dir="$work/profile" --no-pdf-header-footer --print-to-pdf="$out/scanned-notes.pdf" "file://$work/scan.html" 2>/dev/null
