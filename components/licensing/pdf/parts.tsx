import { Path, StyleSheet, Svg, Text, View } from "@react-pdf/renderer";
import { create } from "qrcode";
import type { ReactNode } from "react";
import { SANS, WORK } from "./fonts";

const INK = "#13222C";
const SOFT = "#4A5B66";
const LINE = "#C9D5DC";

export const look = StyleSheet.create({
  page: {
    fontFamily: SANS,
    fontSize: 9,
    color: INK,
    paddingTop: 48,
    paddingBottom: 56,
    paddingHorizontal: 52,
  },
  // Not on the page itself: text that is drawn late, such as the page's number, vanishes under a line height.
  body: { fontSize: 9, lineHeight: 1.45 },
  head: { fontSize: 17, lineHeight: 1.3, marginTop: 6 },
  section: { marginTop: 16 },
  sectionHead: {
    fontWeight: 600,
    fontSize: 10,
    lineHeight: 1.45,
    borderBottomWidth: 0.9,
    borderBottomColor: INK,
    paddingBottom: 2,
    marginBottom: 2,
  },
  row: { flexDirection: "row", borderBottomWidth: 0.5, borderBottomColor: LINE, paddingVertical: 3.2 },
  name: { width: 106, color: SOFT, paddingRight: 8 },
  value: { flex: 1 },
  soft: { color: SOFT, fontSize: 8, lineHeight: 1.45 },
  work: { fontFamily: WORK, fontStyle: "italic", fontWeight: 500 },
  foot: {
    position: "absolute",
    left: 52,
    right: 52,
    bottom: 26,
    flexDirection: "row",
    justifyContent: "space-between",
    color: SOFT,
    fontSize: 7.5,
  },
});

export function Work({ children }: { children: string }) {
  return <Text style={look.work}>{children}</Text>;
}

export function Part({ head, children }: { head: string; children: ReactNode }) {
  return (
    <View style={look.section}>
      <Text minPresenceAhead={40} style={look.sectionHead}>
        {head}
      </Text>
      {children}
    </View>
  );
}

export function Fact({
  name,
  children,
  below,
}: {
  name: string;
  children: ReactNode;
  below?: string | null | undefined;
}) {
  return (
    <View style={look.row} wrap={false}>
      <Text style={look.name}>{name}</Text>
      <View style={look.value}>
        <Text>{children}</Text>
        {below?.split("\n").map((line) => (
          <Text key={line} style={look.soft}>
            {line}
          </Text>
        ))}
      </View>
    </View>
  );
}

/** The address of the public page as a square of dark and light, drawn as one path. */
export function Square({ text, sizePt }: { text: string; sizePt: number }) {
  const { modules } = create(text, { errorCorrectionLevel: "M" });
  const { size } = modules;
  let path = "";
  for (let row = 0; row < size; row++)
    for (let column = 0; column < size; column++)
      if (modules.get(row, column)) path += `M${column} ${row}h1v1h-1z`;
  return (
    <Svg height={sizePt} viewBox={`-2 -2 ${size + 4} ${size + 4}`} width={sizePt}>
      <Path d={path} fill={INK} />
    </Svg>
  );
}
