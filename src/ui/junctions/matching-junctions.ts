import type { ListedJunction } from "@/domain/junction";

/** Junctions in whose name, number or corridor every word of the search occurs; capitals and accents do not matter. */
export function matchingJunctions(junctions: ListedJunction[], search: string): ListedJunction[] {
  const words = plain(search).split(/\s+/).filter(Boolean);
  if (words.length === 0) return junctions;
  return junctions.filter((junction) => {
    const text = plain(`${junction.name} ${junction.code} ${junction.corridor ?? ""}`);
    return words.every((word) => text.includes(word));
  });
}

function plain(text: string): string {
  return text.normalize("NFD").replace(/\p{Diacritic}/gu, "").toLowerCase();
}
