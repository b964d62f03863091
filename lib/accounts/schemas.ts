import { z } from "zod";
import { checkIpiNameNumber } from "@/lib/kernel/identifiers";
import { EmailAddress } from "./emails";
import { PASSWORD_LENGTH_MAX, ROLES, STAFF_GRANTS } from "./states";

export const PersonName = z
  .string()
  .trim()
  .min(2, "Write the name as it should be read.")
  .max(200, "A name has at most 200 characters.");

export const Password = z
  .string()
  .min(1, "Write a password.")
  .refine(
    (text) => [...text].length <= PASSWORD_LENGTH_MAX,
    `A password has at most ${PASSWORD_LENGTH_MAX} characters.`,
  );

const id = z.string().max(40);

/** A field that may stay empty. */
const blankAsNull = (length: number) =>
  z
    .string()
    .trim()
    .max(length, `At most ${length} characters.`)
    .transform((text) => text || null)
    .nullable()
    .default(null);

const RoleFields = {
  role: z.enum(ROLES, "Choose a role."),
  libraryId: id.nullable().default(null),
  companyId: id.nullable().default(null),
  mayApprove: z.boolean().default(false),
  granted: z.array(z.enum(STAFF_GRANTS)).default([]),
  /** The library's or company's name, where no role in it names it yet. */
  scopeName: z.string().trim().max(200).nullable().default(null),
  endsAt: z.coerce.date().nullable().default(null),
};

export const InvitePerson = z.object({
  email: EmailAddress,
  name: PersonName,
  ...RoleFields,
});
export type InvitePerson = z.infer<typeof InvitePerson>;

export const GrantMembership = z.object({ personId: id, ...RoleFields });
export type GrantMembership = z.infer<typeof GrantMembership>;

export const EndMembership = z.object({ membershipId: id });
export const ChooseRole = z.object({ membershipId: id });
export const WithdrawInvitation = z.object({ invitationId: id });

export const AcceptInvitation = z.object({
  token: z.string().max(100),
  name: PersonName,
  /** Left out: sign in by a link, or with the password the account already has. */
  password: Password.optional(),
});

export const RegisterPerson = z.object({
  email: EmailAddress,
  name: PersonName,
  password: Password.optional(),
  timeZone: z.string().max(60).default("Etc/UTC"),
  demo: z.boolean().default(false),
});

export const SetPassword = z.object({
  current: z.string().max(1024).optional(),
  password: Password,
});

export const SignInByPassword = z.object({
  email: EmailAddress,
  password: z.string().min(1, "Write your password."),
});

export const RequestSignInLink = z.object({
  email: EmailAddress,
  /** Where the request came from: said by the site, never by the form. */
  address: z.string().max(100).default("unknown"),
});

export const ConfirmSecondFactor = z.object({
  personId: id,
  sessionVersion: z.number().int(),
  code: z.string().trim().max(12),
  address: z.string().max(100),
});

const Ipi = z
  .string()
  .trim()
  .transform((text, context) => {
    if (text === "") return null;
    const check = checkIpiNameNumber(text);
    if (check.ok) return check.normalised;
    context.addIssue({ code: "custom", message: check.message });
    return z.NEVER;
  });

export const ConfirmName = z.object({
  personId: id,
  /** For the system only: others confirm for the library whose role they use. */
  libraryId: id.nullable().default(null),
  legalName: PersonName,
  creditName: PersonName,
  ipi: Ipi.nullable().default(null),
  society: blankAsNull(60),
});

export const FindWriter = z
  .object({
    libraryId: id,
    ipi: z.string().trim().max(20).optional(),
    email: EmailAddress.optional(),
  })
  .refine((given) => given.ipi || given.email, "Give an IPI or an e-mail address.");

export const RegisterCompany = z.object({
  name: z.string().trim().min(2, "Write the company's name.").max(200),
  address: z.string().trim().min(5, "Write the address that belongs on an invoice.").max(500),
  countryCode: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{2}$/, "Choose a country."),
  taxNumber: blankAsNull(30),
});
export type RegisterCompany = z.infer<typeof RegisterCompany>;

export const AuditPage = z.object({
  /** Id of the last row seen: the next page begins after it. */
  after: id.nullable().default(null),
  subject: z.string().trim().max(80).nullable().default(null),
});
