/** Where the server notes a connection's address for the pages; whatever a client sends under this name is overwritten. */
export const PEER_HEADER = "x-tailmark-peer";
