// Package rate tells whether a recording was logged fast enough for energy.
//
// Energy is the integral of a product, such as pressure times flow. A product of means is
// not the mean of the product, and rows far apart miss what happens between them. Without
// a faster recording the error is estimated from the data: rows are thinned, or joined to
// means, by two and by four, and the change is carried on to the interval as it is
// (Richardson, Phil. Trans. R. Soc. A 210 (1911) 307).
package rate
