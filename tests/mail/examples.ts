import type { MailName, MailProps } from "@/lib/mail";

const at = "2026-05-18T09:14:00Z";
const later = "2026-05-27T16:00:00Z";
const url = "http://127.0.0.1:3400/deliveries/del_1";
const zone = "Europe/London";
const gbp = (minor: number) => ({ minor: String(minor), currency: "GBP" });

const restriction = {
  since: at,
  appliesTo: "everywhere",
  reliedOn: ["0:20 to 1:05 of the recording", "notice RW-06"],
  isFoundBySoftware: true,
  rule: "Terms for deliverers, 4.2: the recording contains no other recording without permission.",
  why: "The passage is another recording.\n\nNo permission was shown.",
  earnings: "held from today.",
  licences: "unchanged.",
  appealUrl: url,
  appealUntil: "2026-11-18T23:59:59Z",
};

/** One letter of each kind, and each outcome of a finding. */
export const examples: { [N in MailName]: MailProps<N>[] } = {
  "answer-received": [
    { title: "Lantern Steps", receivedAt: at, papersCount: 1, decisionBy: later, url, zone },
  ],
  "bank-change-notice": [
    { payeeName: "Ailsa Trevarrick-Moe", changedAt: at, bankLast4: "4321", heldUntil: later, url, zone },
  ],
  "co-writer-accepted": [
    {
      title: "Lantern Steps",
      writerName: "Dov Marchetti-Ruane",
      acceptedAt: at,
      waitingFor: ["Eluned Pryce-Santoro", "Farrukh Tollander"],
      url,
      zone,
    },
  ],
  "co-writer-not-accepted": [
    { title: "Lantern Steps", writerName: "Dov Marchetti-Ruane", answer: "declined", url },
    { title: "Lantern Steps", writerName: "Dov Marchetti-Ruane", answer: "no answer", url },
  ],
  "delivery-listed": [
    {
      title: "Lantern Steps",
      libraryName: "Saltmarrow Music Library",
      listedAt: at,
      versions: ["full", "bed"],
      waitingVersions: ["sting"],
      url,
      zone,
    },
  ],
  "delivery-receipt": [
    {
      title: "Lantern Steps",
      receivedAt: at,
      files: [{ name: "lantern-steps_full.wav", sizeBytes: 48_000_000, sha256: "ab".repeat(32) }],
      nextNewsBy: "2026-05-18T17:00:00Z",
      url,
      zone,
    },
  ],
  "finding-statement": [
    {
      outcome: "clear",
      title: "Lantern Steps",
      decidedAt: at,
      url,
      zone,
      explanation: "The loop is registered, and your paper covers this use.",
    },
    {
      outcome: "returned",
      title: "Lantern Steps",
      decidedAt: at,
      url,
      zone,
      fixes: [{ code: "T03", text: "the 30-second edit is 30.40 s (allowed 29.95 to 30.05)" }],
    },
    {
      outcome: "hold",
      title: "Lantern Steps",
      decidedAt: at,
      url,
      zone,
      ...restriction,
      untilInWords: "the question is answered",
    },
    {
      outcome: "refused",
      title: "Lantern Steps",
      decidedAt: at,
      url,
      zone,
      ...restriction,
      reasonCode: "R02",
    },
  ],
  invitation: [
    {
      inviterName: "Morag Ettrick-Sloane",
      organisationName: "Saltmarrow Music Library",
      roleInWords: "a composer",
      url,
      expiresAt: later,
      zone,
    },
  ],
  "order-confirmation": [
    {
      orderNumber: "O-1041",
      paidAt: at,
      sellerName: "Sedgewren",
      licensorName: "Saltmarrow Music Library",
      companyName: "Thistlemoth Pictures",
      invoiceNumber: "SM-2026-0007",
      invoiceUrl: url,
      licences: [
        {
          title: "Lantern Steps",
          scopeInWords: "one advert, UK, 1 year",
          recordNumber: "LR-2026-0103-C",
          proofCode: "0123-4567-89AB-CDEF-G",
          recordUrl: url,
          proofUrl: url,
          net: gbp(24_000),
        },
      ],
      net: gbp(24_000),
      taxInWords: "VAT 20 %",
      tax: gbp(4_800),
      gross: gbp(28_800),
      orderUrl: url,
      zone,
    },
  ],
  "payout-sent": [
    {
      payeeName: "Ailsa Trevarrick-Moe",
      periodInWords: "May 2026",
      amount: gbp(7_720),
      sentAt: at,
      reference: "PO-0007",
      bankLast4: "4321",
      statementUrl: url,
      zone,
    },
  ],
  "question-from-moderator": [
    {
      title: "Lantern Steps",
      passages: [{ from: "0:48", to: "0:54" }],
      question: "Which applies?\nPlease attach the paper.",
      answerBy: later,
      url,
      zone,
    },
  ],
  "refund-notice": [
    {
      orderNumber: "O-1041",
      amount: gbp(15_000),
      refundedAt: at,
      reason: "The cue was bought twice.",
      creditNoteNumber: "SM-CN-0001",
      licences: [
        { title: "Lantern Steps", recordNumber: "LR-2026-0103-C", effect: "cancelled on 18 May 2026" },
      ],
      orderUrl: url,
      zone,
    },
  ],
  "report-confirm-address": [{ receiptNumber: "RW-05", url, expiresAt: later, zone }],
  "report-receipt": [
    {
      receiptNumber: "RW-05",
      workTitle: "Lantern Steps",
      receivedAt: at,
      missing: ["which page or cue it is about"],
      nextNewsBy: later,
      url,
      zone,
    },
  ],
  "report-status": [
    {
      receiptNumber: "RW-05",
      workTitle: "Lantern Steps",
      state: "We have not removed anything.",
      reasons: "The passage is a drum loop sold to many.",
      decidedAt: at,
      complaintUntil: "2026-11-18T23:59:59Z",
      url,
      zone,
    },
  ],
  "role-changed": [
    {
      change: "given",
      roleInWords: "a moderator",
      organisationName: "Saltmarrow Music Library",
      byName: "Morag Ettrick-Sloane",
      changedAt: at,
      url,
      zone,
    },
  ],
  "sign-in-link": [{ url, expiresAt: at, zone }],
  "split-acceptance-request": [
    {
      title: "Lantern Steps",
      delivererName: "Ailsa Trevarrick-Moe",
      libraryName: "Saltmarrow Music Library",
      sharePercent: "33.33",
      shares: [
        { writerName: "Ailsa Trevarrick-Moe", percent: "66.67" },
        { writerName: "Dov Marchetti-Ruane", percent: "33.33" },
      ],
      url,
    },
  ],
};
