// Package published answers: do the methods give the values their publications
// print? It holds no code of its own: its tests set expected and own values
// side by side, fail where they drift apart, and write the table that people
// read, docs/published-checks.md.
package published
