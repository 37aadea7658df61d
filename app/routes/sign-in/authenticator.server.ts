import { Authenticator } from "remix-auth";
import { FormStrategy } from "remix-auth-form";
import { type SignInResult, signIn } from "../../operations/sign-in.server.ts";

/** The ways to sign in. So far one: e-mail address and password, from a form. */
export const authenticator = new Authenticator<SignInResult>();

authenticator.use(
  new FormStrategy(({ form, request }) =>
    signIn({
      email: String(form.get("email") ?? ""),
      password: String(form.get("password") ?? ""),
      userAgent: request.headers.get("User-Agent") ?? "",
    }),
  ),
);
