// Passwords as people type them, and the account forms that never send one back.
import { expect, test } from "vitest";
import { parseAcceptInvitationForm, parseForgotForm, parseResetForm, parseSignInForm } from "~/forms/account";
import { passwordProblem } from "~/forms/password";

const good = "lantern orchard 47 tide";

test("a password has 12 to 256 characters, counted as characters, of any composition", () => {
  expect(passwordProblem("kq8Zt3w")).toMatch(/at least 12/);
  expect(passwordProblem("kq8Zt3wPr5x")).toMatch(/at least 12/);
  expect(passwordProblem("kq8Zt3wPr5xb")).toBeNull();
  expect(passwordProblem("839201746352")).toBeNull();
  expect(passwordProblem("кошка гуляет 🌊 по берегу")).toBeNull();
  expect(passwordProblem(`${"plough 9 ".repeat(28)}abcd`)).toBeNull();
  expect(passwordProblem(`${"plough 9 ".repeat(28)}abcde`)).toMatch(/at most 256/);
  // Eleven signs that take 22 code units are eleven characters.
  expect(passwordProblem("🌊🌋🌌🌍🌎🌏🌐🌑🌒🌓🌔")).toMatch(/at least 12/);
});

test("what is guessed first is refused", () => {
  for (const common of [
    "password123456",
    "Password2026!!",
    "qwertyuiop123",
    "123456789012",
    "987654321098",
    "abcdefghijklm",
    "aaaaaaaaaaaa",
    "ababababababab",
    "Welcome2026!!!",
    "Summer2026!!!!",
  ]) {
    expect([common, passwordProblem(common)]).not.toEqual([common, null]);
  }
});

test("the names of the person, the company and the product make no password", () => {
  const context = { email: "rike.amsel@northgale.example", organisation: "Northgale Radio", name: "Rike Amsel" };
  for (const own of ["tenderband2026", "NorthgaleRadio1", "rike.amsel2026", "northgale-2026", "Amsel!Rike!2026"]) {
    expect([own, passwordProblem(own, context)]).toEqual([own, expect.stringMatching(/name/)]);
  }
  expect(passwordProblem("northgale ferry lantern", context)).toBeNull();
});

test("accepting an invitation takes names and one password typed twice alike, to the last space", () => {
  const input = {
    organisationName: "Halden Resonator Works",
    name: "Tove Lind",
    password: `${good} `,
    passwordAgain: `${good} `,
  };
  const accept = (changes: Record<string, string> = {}) =>
    parseAcceptInvitationForm({ ...input, ...changes }, { email: "quotes@halden.example" });
  expect(accept()).toMatchObject({ ok: true, value: { password: `${good} ` } });
  expect(accept({ passwordAgain: good })).toMatchObject({ ok: false, errors: { passwordAgain: [expect.anything()] } });
  expect(accept({ organisationName: "", name: "" })).toMatchObject({
    errors: { organisationName: [expect.anything()], name: [expect.anything()] },
  });
  expect(accept({ password: "HaldenResonator", passwordAgain: "HaldenResonator" })).toMatchObject({
    errors: { password: [expect.anything()] },
  });
});

test("no password is among the values of a refused form", () => {
  const refused = [
    parseSignInForm({ email: "nobody", password: good }),
    parseResetForm({ password: good, passwordAgain: "other" }),
    parseAcceptInvitationForm(
      { organisationName: "", name: "", password: good, passwordAgain: good },
      { email: "a@b.example" },
    ),
  ];
  for (const result of refused) {
    expect(result.ok).toBe(false);
    expect(JSON.stringify(result)).not.toContain(good);
  }
});

test("sign-in folds the address, takes the password as typed and refuses one that is too long to hash", () => {
  expect(parseSignInForm({ email: " Rike@Northgale.example ", password: " x " })).toEqual({
    ok: true,
    value: { email: "rike@northgale.example", password: " x ", returnTo: "" },
  });
  expect(parseSignInForm({ email: "a@b.example", password: "x".repeat(257) })).toMatchObject({
    errors: { password: [expect.anything()] },
  });
  expect(parseSignInForm({ email: "a@b.example", password: "" })).toMatchObject({
    errors: { password: ["Enter your password."] },
  });
  expect(parseForgotForm({ email: "" })).toMatchObject({ errors: { email: ["Enter an e-mail address."] } });
});

test("fields a form does not have are ignored", () => {
  expect(parseForgotForm({ email: "a@b.example", role: "admin", organisationId: "1" })).toEqual({
    ok: true,
    value: { email: "a@b.example" },
  });
});
