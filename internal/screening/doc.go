// Package screening asks of thousands of places which of many sites can serve
// each, and with what mast.
//
// A Plan holds the sites and what holds for all links. Run takes candidates one
// by one, judges the path to every site in whose range and sector one lies, and
// hands the results on in the order of the candidates. Memory is bounded by a
// chunk of candidates, whatever their number.
//
// The site is end A of each path and the candidate end B. Of the sites that were
// judged a Result keeps the best three, in this order of preference:
//
//  1. the verdict: clear, marginal, obstructed, unknown;
//  2. served without a mast, with one up to the limit of the plan, not at all;
//  3. the lower mast;
//  4. the higher confidence, to a hundredth;
//  5. the greater margin over what the criteria ask;
//  6. the shorter path;
//  7. the id of the site.
//
// A judgement that fails is unknown, never left out: what keeps one site from
// being judged says nothing against the others.
package screening
