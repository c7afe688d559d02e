import fc from "fast-check";

// Property tests try the same examples on every machine and every day; a failure prints what it needs to be found again.
fc.configureGlobal({ seed: 20_261_201 });
