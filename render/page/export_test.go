package page

// Hash is the hash of a policy.
var Hash = hash
