/**
 * The whole virtual stage against values from outside: a drill's text goes in, its measures and what a listener is told
 * come out. Where the theory knows no wire, hops take no time.
 */
package steelyard.outside.stage;
