// Package floors holds no program: its test keeps the packages of the module on
// their floors.
//
// DEVELOPERS.md lists the floors in a text block. A package may import packages
// of lower floors, and packages to its left on its own floor. Its tests may
// import whatever is not above their floor, and the fixtures.
package floors
