using System.Security.Cryptography;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Checks the signatures of one chain, keeping the key that was read last.</summary>
internal sealed class SignatureCheck : IDisposable
{
    private readonly ECDsa? _trusted;
    private readonly string? _trustedText;
    private ECDsa? _stated;
    private string? _statedText;

    /// <param name="trusted">The key that every signature must be by; null to believe the key each snapshot states.</param>
    public SignatureCheck(ECDsa? trusted)
    {
        if (trusted is not null)
        {
            SnapshotSeal.CheckKey(trusted, nameof(trusted));
            _trusted = trusted;
            _trustedText = SnapshotSeal.PublicKey(trusted);
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _stated?.Dispose();

    /// <summary>Checks one snapshot's signature.</summary>
    /// <param name="members">The snapshot.</param>
    /// <param name="hash">The hash that its contents give.</param>
    /// <returns>The fault and its sentence, or null.</returns>
    public (ChainFaultKind Kind, string What)? Check(SnapshotMembers members, byte[] hash)
    {
        if (members["signature"] is null)
        {
            return Unsigned(members);
        }

        if (members["signing_key"] is null)
        {
            return (ChainFaultKind.SignatureWrong, "it carries a signature but was sealed without a signing key, so the signature was added later");
        }

        if (_trusted is not null && members.Text("signing_key") != _trustedText)
        {
            return (ChainFaultKind.SigningKeyUntrusted, "it is signed with another key than the trusted one, so somebody else sealed it");
        }

        return Key(members.Text("signing_key")) is { } key && Fits(key, members.Text("signature"), hash)
            ? null
            : (ChainFaultKind.SignatureWrong, "its signature does not belong to these contents and this key");
    }

    private (ChainFaultKind Kind, string What)? Unsigned(SnapshotMembers members)
    {
        if (members["signing_key"] is not null)
        {
            return (ChainFaultKind.SignatureMissing, "it was sealed with a signing key, but its signature has been taken out");
        }

        return _trusted is null ? null : (ChainFaultKind.SignatureMissing, "it is not signed, though a trusted key was given");
    }

    private ECDsa? Key(string? text)
    {
        if (_trusted is not null)
        {
            return _trusted;
        }

        if (text is not null && text != _statedText)
        {
            _stated?.Dispose();
            _stated = Import(text);
            _statedText = text;
        }

        return text is null ? null : _stated;
    }

    private static ECDsa? Import(string text)
    {
        var key = ECDsa.Create();
        try
        {
            key.ImportSubjectPublicKeyInfo(Convert.FromBase64String(text), out _);
            SnapshotSeal.CheckKey(key, nameof(text));
            return key;
        }
        catch (Exception e) when (e is FormatException or CryptographicException or ArgumentException)
        {
            key.Dispose();
            return null;
        }
    }

    // The last digit of base64 has spare bits; only the one spelling that sealing writes is accepted.
    private static bool Fits(ECDsa key, string? text, byte[] hash)
    {
        Span<byte> signature = stackalloc byte[64];
        return text is not null
            && Convert.TryFromBase64String(text, signature, out var length)
            && length == signature.Length
            && Convert.ToBase64String(signature) == text
            && key.VerifyHash(hash, signature, SnapshotSeal.Signing);
    }
}
