/** Names for side streets, in the order in which they are needed. */
export const SIDE_STREET_NAMES: readonly string[] = [
  "Pilot Close", "Mooring Lane", "Puffin Lane", "Buoy Street", "Shingle Lane", "Cockle Street", "Mussel Lane", "Lobster Yard",
  "Driftwood Lane", "Tarpot Lane", "Mast Street", "Rudder Lane", "Sextant Close", "Compass Street", "Ballast Lane", "Galley Lane",
  "Hawser Street", "Jetty Lane", "Fathom Street", "Ebb Lane", "Neap Street", "Spring Tide Lane", "Breakwater Road", "Sandbar Lane",
  "Pebble Street", "Dune Lane", "Seagrass Lane", "Oyster Street", "Whelk Lane", "Shearwater Street", "Razorbill Lane", "Guillemot Street",
  "Osprey Lane", "Petrel Close", "Mizzen Street", "Topsail Lane", "Jib Street", "Cutter Lane", "Sloop Street", "Ketch Lane",
  "Schooner Street", "Dory Lane", "Coble Street", "Trawl Lane", "Seine Street", "Netmaker Lane", "Caulker Street", "Hemp Lane",
  "Pitch Lane", "Adze Street", "Slipway Lane", "Gantry Street", "Crane Lane", "Bonded Lane", "Tallow Street", "Salt Lane",
  "Brine Street", "Smokehouse Lane", "Icehouse Street", "Lamp Lane", "Signal Street", "Foghorn Lane", "Watchtower Street", "Bell Lane",
  "Pier Street", "Causeway Lane", "Lagoon Street", "Inlet Lane", "Headland Street", "Cove Lane", "Reef Street", "Shoal Lane",
  "Eddy Street", "Current Lane", "Leeward Street", "Windward Lane", "Starboard Street", "Larboard Lane", "Gunwale Street", "Thwart Lane",
  "Rowlock Street", "Oar Lane", "Paddle Street", "Tide Mill Lane", "Sound Street", "Gull Lane",
];
