//! How the objects of the JSON are declared: a key once, with its description, for the text and for the schema.

/// An object: the struct that is written, and (in tests) its part of the JSON Schema, made of the same doc comments.
macro_rules! object {
    (
        $(#[doc = $about:literal])+
        $name:ident $(<$life:lifetime>)? {
            $( $(#[doc = $doc:literal])+ $key:ident: $type:ty, )+
        }
    ) => {
        $(#[doc = $about])+
        #[derive(serde::Serialize)]
        // The keys' units are their last part; many answers are yes or no.
        #[allow(clippy::struct_field_names, clippy::struct_excessive_bools)]
        pub(super) struct $name $(<$life>)? {
            $( $(#[doc = $doc])+ pub $key: $type, )+
        }

        #[cfg(test)]
        impl $(<$life>)? super::schema::Described for $name $(<$life>)? {
            fn describe(definitions: &mut super::schema::Definitions) -> serde_json::Value {
                super::schema::object(
                    definitions,
                    stringify!($name),
                    &[$($about),+],
                    &[$( (stringify!($key), &[$($doc),+], <$type as super::schema::Described>::describe) ),+],
                )
            }
        }
    };
}

/// A text that is one of few words: each case of the source has its own, or this does not compile.
macro_rules! words {
    (
        $(#[doc = $about:literal])+
        $name:ident for $source:ty { $( $case:pat => $word:literal, )+ }
    ) => {
        $(#[doc = $about])+
        #[derive(serde::Serialize)]
        #[serde(transparent)]
        pub(super) struct $name(&'static str);

        impl From<&$source> for $name {
            fn from(source: &$source) -> Self {
                Self(match source { $( $case => $word, )+ })
            }
        }

        #[cfg(test)]
        impl super::schema::Described for $name {
            fn describe(definitions: &mut super::schema::Definitions) -> serde_json::Value {
                super::schema::words(definitions, stringify!($name), &[$($about),+], &[$($word),+])
            }
        }
    };
}

pub(super) use {object, words};
