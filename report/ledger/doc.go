// Package ledger keeps what was read and what was decided, in SQLite files
// beside the papers.
//
// halfspan.ledger ([Ledger]) holds papers and results as this version of the
// program reads them. It may be deleted and made again by a scan.
// halfspan.AB.ledger ([Decisions]) holds what checker AB decided. It is only
// ever added to, holds every record whole as it was seen, and no scan touches it.
//
// A [Book] is the two together: [OpenBook], then [Book.Rows] for every result
// with its state, and [Book.Decide], the one function that takes decisions for
// terminal, sheet and desk alike. It refuses when what the person saw is not what
// stands there now. [Book.Undo] takes a decision back, [Book.Add] takes a result
// that a person found, [Book.Stamp] tells whether anything changed.
//
// A result is known again by its anchor (content of the paper, place, digits),
// never by its id; the id is a name given once and kept. Decisions whose result
// this version no longer finds stay, and are shown as such.
//
// Every change is one immediate transaction, synchronised to disk before the
// call returns, under a rollback journal: no -wal or -shm file lies beside the
// papers. The package knows no screens, no files of papers and no statistics.
package ledger
